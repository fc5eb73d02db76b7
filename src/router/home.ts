/** What is opened first: partners on a phone look at their own places, everybody else at the watch. */
import type { Role } from '../../shared/schemas/session.ts'

export const homeOf = (role: Role | null): 'places' | 'watch' =>
  role === 'partner' && window.matchMedia('(max-width: 47.9988em)').matches ? 'places' : 'watch'
