/** The pages that the bars offer, in their order, and to whom. */
import type { Action } from '../../shared/access.ts'

export interface PageEntry {
  name: string
  title: string
  keys: string
  action: Action
  /** Has its place in the bars of narrow screens; the others stand under More there. */
  isFirst: boolean
}

export const pages: readonly PageEntry[] = [
  { name: 'watch', title: 'Watch', keys: 'g w', action: 'stations.read', isFirst: true },
  { name: 'stations', title: 'Stations', keys: 'g s', action: 'stations.read', isFirst: true },
  { name: 'alerts', title: 'Alerts', keys: 'g a', action: 'alerts.read', isFirst: true },
  { name: 'limits', title: 'Limits', keys: 'g i', action: 'limits.read', isFirst: false },
  { name: 'messages', title: 'Messages', keys: 'g m', action: 'messages.read', isFirst: false },
  { name: 'lists', title: 'Lists', keys: 'g t', action: 'profile.read', isFirst: false },
]
