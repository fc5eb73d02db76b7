import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { pages } from '../router/pages.ts'
import type { PageEntry } from '../router/pages.ts'
import { useSession } from '../stores/session.ts'

/** The pages that this person may open. */
export function usePages(): ComputedRef<PageEntry[]> {
  const session = useSession()
  return computed(() => pages.filter((page) => session.allows(page.action)))
}
