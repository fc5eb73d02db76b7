/** What is set up beside the stations: the hub's list, in its order, each with the action that it asks for. */
import type { RouteLocationRaw } from 'vue-router'
import type { Action } from '../../../shared/access.ts'

export interface SetUpEntry {
  title: string
  says: string
  to: RouteLocationRaw
  action: Action
}

export const setUpEntries: readonly SetUpEntry[] = [
  {
    title: 'Places',
    says: 'entrance, breakwater, berths, beaches: their numbers, which stations feed them, whose they are',
    to: { name: 'setUpPlaces' },
    action: 'places.change',
  },
  {
    title: 'People',
    says: 'accounts, roles, invitations, second factors, where somebody is signed in',
    to: { name: 'people' },
    action: 'accounts.read',
  },
  {
    title: 'Settings',
    says: 'port, emergency contact, cautions, sender, second factor, retention; versions and the way back',
    to: { name: 'officeSettings' },
    action: 'settingVersions.read',
  },
  {
    title: 'Audit',
    says: 'who changed what and when, and whether the record is whole',
    to: { name: 'audit' },
    action: 'audits.read',
  },
  {
    title: 'System',
    says: 'versions, database, jobs, e-mails, disk, backups',
    to: { name: 'system' },
    action: 'system.read',
  },
]
