/** The pages that the bars offer, in their order, and to whom. */
import type { Action } from '../../shared/access.ts'

export interface PageEntry {
  name: string
  title: string
  keys: string
  action: Action
  /** Has its place in the bars of narrow screens; the others stand under More there. */
  isFirst: boolean
  /** Has its place in the wide bar; the others stand in the account's menu and on the pages they belong to. */
  isInBar: boolean
  /** Has its place in the phone's bar; as in the bars of narrow screens where it is not given. */
  isOnPhone?: boolean
}

export const isOnPhone = (page: PageEntry): boolean => page.isOnPhone ?? page.isFirst

export const pages: readonly PageEntry[] = [
  { name: 'watch', title: 'Watch', keys: 'g w', action: 'stations.read', isFirst: true, isInBar: true },
  {
    name: 'stations',
    title: 'Stations',
    keys: 'g s',
    action: 'stations.read',
    isFirst: true,
    isInBar: true,
    isOnPhone: false,
  },
  { name: 'places', title: 'Places', keys: 'g p', action: 'places.read', isFirst: true, isInBar: true },
  { name: 'alerts', title: 'Alerts', keys: 'g a', action: 'alerts.read', isFirst: true, isInBar: true },
  { name: 'limits', title: 'Limits', keys: 'g i', action: 'limits.read', isFirst: false, isInBar: true },
  { name: 'log', title: 'Log', keys: 'g l', action: 'log.read', isFirst: false, isInBar: true },
  { name: 'bulletins', title: 'Bulletins', keys: 'g b', action: 'bulletins.read', isFirst: false, isInBar: true },
  { name: 'messages', title: 'Messages', keys: 'g m', action: 'messages.read', isFirst: false, isInBar: false },
  { name: 'lists', title: 'Lists', keys: 'g t', action: 'profile.read', isFirst: false, isInBar: false },
  { name: 'mySettings', title: 'My settings', keys: 'g y', action: 'profile.read', isFirst: false, isInBar: false },
  { name: 'setUp', title: 'Set-up', keys: 'g u', action: 'stationSetUp.read', isFirst: false, isInBar: true },
]
