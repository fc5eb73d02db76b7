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
    title: 'People',
    says: 'accounts, roles, invitations, second factors, where somebody is signed in',
    to: { name: 'people' },
    action: 'accounts.read',
  },
]
