/** Who may do what: asked by the server before every route and room, and by the client before it offers a control. */
import type { Role } from './schemas/session.ts'

/** Everything that somebody may be allowed or refused. */
export type Action =
  | 'session.read'
  | 'session.begin'
  | 'session.end'
  | 'installation.read'
  | 'setUp.complete'
  | 'settings.read'
  | 'stations.read'
  | 'stationKeys.read'
  | 'stationKeys.change'
  | 'stationHealth.read'
  | 'stationSetUp.read'
  | 'stationSetUp.change'
  | 'imports.read'
  | 'imports.change'
  | 'auxiliary.read'
  | 'auxiliary.change'
  | 'auxiliaryFeed.change'
  | 'runs.read'
  | 'runs.change'
  | 'clockOffsets.change'
  | 'jobs.read'
  | 'jobs.cancel'
  | 'log.read'
  | 'audits.read'
  | 'openapi.read'
  | 'alerts.read'
  | 'alerts.acknowledge'
  | 'alerts.shelve'
  | 'drills.change'
  | 'alertPerformance.read'
  | 'cap.read'
  | 'limits.read'
  | 'limits.change'
  | 'dailyEmail.read'
  | 'dailyEmail.change'
  | 'watchRules.read'
  | 'watchRules.change'
  | 'lists.read'
  | 'lists.change'
  | 'people.read'
  | 'people.change'
  | 'mailSides.change'
  | 'profile.read'
  | 'profile.change'
  | 'messages.read'
  | 'deliveries.change'
  | 'log.change'
  | 'watches.read'
  | 'watches.change'
  | 'bulletins.read'
  | 'bulletins.change'
  | 'publicBulletins.read'
  | 'receipts.read'
  | 'receipts.confirm'
  | 'places.read'
  | 'places.change'
  | 'notices.change'
  | 'observations.change'
  | 'accounts.read'
  | 'passphraseLinks.read'
  | 'passphraseLinks.complete'
  | 'secondFactor.read'
  | 'secondFactor.change'
  | 'audits.confirm'
  | 'settingVersions.read'
  | 'settings.change'
  | 'configuration.read'
  | 'configuration.change'
  | 'system.read'

const everyone: readonly Role[] = ['admin', 'operator', 'partner']
const anybody = 'anybody'

/** `anybody` needs no session; a list names the roles. An action without a row is refused. */
const rows: Record<Action, readonly Role[] | typeof anybody> = {
  'session.read': everyone,
  'session.begin': anybody,
  'session.end': anybody,
  'installation.read': anybody,
  'setUp.complete': anybody,
  'openapi.read': everyone,
  'settings.read': everyone,
  'stations.read': everyone,
  'stationHealth.read': ['admin', 'operator'],
  'stationSetUp.read': ['admin'],
  'stationSetUp.change': ['admin'],
  'imports.read': ['admin'],
  'imports.change': ['admin'],
  'auxiliary.read': everyone,
  'auxiliary.change': ['admin'],
  // The station's key says who.
  'auxiliaryFeed.change': anybody,
  'stationKeys.read': ['admin'],
  'stationKeys.change': ['admin'],
  'runs.read': ['admin', 'operator'],
  'runs.change': ['admin'],
  'clockOffsets.change': ['admin'],
  'jobs.read': everyone,
  'jobs.cancel': ['admin'],
  'log.read': ['admin', 'operator'],
  'audits.read': ['admin'],
  'alerts.read': everyone,
  'alerts.acknowledge': ['operator'],
  'alerts.shelve': ['operator'],
  'drills.change': ['operator'],
  'alertPerformance.read': ['admin', 'operator'],
  // Of the alerts alone whose limit says that they are published.
  'cap.read': anybody,
  'limits.read': ['admin', 'operator'],
  'limits.change': ['operator'],
  'dailyEmail.read': ['admin', 'operator'],
  'dailyEmail.change': ['admin', 'operator'],
  'watchRules.read': ['admin', 'operator'],
  // Who is bound by a rule does not lift it.
  'watchRules.change': ['admin'],
  'lists.read': ['admin', 'operator'],
  'lists.change': ['admin', 'operator'],
  'people.read': ['admin', 'operator'],
  'people.change': ['admin'],
  // Somebody ill, or gone on leave in haste, is entered by the watch.
  'mailSides.change': ['admin', 'operator'],
  'profile.read': everyone,
  'profile.change': everyone,
  'messages.read': ['admin', 'operator'],
  'deliveries.change': ['operator'],
  'log.change': ['operator'],
  // Who is on watch shows everywhere, to those who sign in.
  'watches.read': everyone,
  'watches.change': ['operator'],
  'bulletins.read': ['admin', 'operator'],
  'bulletins.change': ['operator'],
  // While the office has switched it on; without anybody's name.
  'publicBulletins.read': anybody,
  // The token in the link says who.
  'receipts.read': anybody,
  'receipts.confirm': anybody,
  'places.read': everyone,
  'places.change': ['admin'],
  // Partners at the places of their team alone, which their services ask.
  'notices.change': ['operator', 'partner'],
  'observations.change': ['operator', 'partner'],
  'accounts.read': ['admin'],
  // The token in the link, or the address that the link is sent to, says who.
  'passphraseLinks.read': anybody,
  'passphraseLinks.complete': anybody,
  'secondFactor.read': everyone,
  'secondFactor.change': everyone,
  'audits.confirm': ['admin'],
  'settingVersions.read': ['admin'],
  'settings.change': ['admin'],
  'configuration.read': ['admin'],
  'configuration.change': ['admin'],
  'system.read': ['admin'],
}

export const actions = Object.keys(rows) as Action[]

/** May a person of this role (null: not signed in) do this? */
export function may(role: Role | null, action: Action): boolean {
  const row = rows[action]
  if (row === anybody) return true
  return role !== null && row !== undefined && row.includes(role)
}

/** Actions that change something: refused while a session is read-only (past its absolute limit). */
export const changes = (action: Action): boolean =>
  /\.(change|cancel|complete|acknowledge|shelve|confirm)$/.test(action)

/** Which action a live room asks for; null for a room that does not exist. */
export function actionOfRoom(room: string): Action | null {
  if (room === 'stations' || /^(station|traces):\d+$/.test(room)) return 'stations.read'
  if (room === 'system') return 'jobs.read'
  if (room === 'connections') return 'stationKeys.read'
  if (room === 'alerts') return 'alerts.read'
  if (room === 'places' || /^place:\d+$/.test(room)) return 'places.read'
  if (room === 'limits') return 'limits.read'
  if (room === 'messages') return 'messages.read'
  if (room === 'watch') return 'log.read'
  if (room === 'onWatch') return 'watches.read'
  if (room === 'bulletins') return 'bulletins.read'
  return null
}
