import { z } from 'zod'
import { accountChange, accountView, invitation, ownSession } from '../../shared/schemas/account.ts'
import type { Parts } from '../config/parts.ts'
import { changeAccount, invite, listAccounts, readAccount, sendLink, setDisabled } from '../services/people/accounts.ts'
import { resetSecondFactor } from '../services/secondFactor.ts'
import { endSessionsOf, listSessions } from '../services/sessions/own.ts'
import { settingInForce } from '../services/settings.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const params = z.object({ personId: idInPath })

export const accountRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/accounts',
    action: 'accounts.read',
    summary: 'All people as accounts: role, state, second factor, where they are signed in',
    answer: z.object({ accounts: z.array(accountView) }),
    handle: async () => ({ accounts: await listAccounts(parts) }),
  }),
  route({
    method: 'post',
    path: '/api/accounts',
    action: 'people.change',
    summary: 'Invites somebody by e-mail, with a link that ends after seven days',
    body: invitation,
    answer: accountView,
    status: 201,
    handle: async ({ body, caller }) => invite(parts, body, caller.person, await settingInForce(parts, 'port')),
  }),
  route({
    method: 'get',
    path: '/api/accounts/:personId',
    action: 'accounts.read',
    summary: 'One account',
    params,
    answer: accountView,
    handle: ({ params: { personId } }) => readAccount(parts, personId),
  }),
  route({
    method: 'put',
    path: '/api/accounts/:personId',
    action: 'people.change',
    summary: 'Name, address, role, team and zone; the new role holds at once; needs If-Match with the version',
    params,
    body: accountChange,
    answer: accountView,
    handle: ({ params: { personId }, body, caller, request }) =>
      changeAccount(parts, personId, versionIn(request), body, caller.person.id),
  }),
  ...[true, false].map((isDisabled) =>
    route({
      method: 'post',
      path: `/api/accounts/:personId/${isDisabled ? 'disable' : 'enable'}`,
      action: 'people.change',
      summary: isDisabled ? 'Signs somebody out everywhere and lets them in no more' : 'Lets somebody in again',
      params,
      answer: accountView,
      handle: ({ params: { personId }, caller, request }) =>
        setDisabled(parts, personId, versionIn(request), isDisabled, caller.person.id),
    }),
  ),
  route({
    method: 'post',
    path: '/api/accounts/:personId/link',
    action: 'people.change',
    summary: 'Sends a link to choose a passphrase: an invitation again (seven days), or a reset (two hours)',
    params,
    answer: accountView,
    handle: async ({ params: { personId }, caller }) =>
      sendLink(parts, personId, caller.person, await settingInForce(parts, 'port')),
  }),
  route({
    method: 'delete',
    path: '/api/accounts/:personId/second-factor',
    action: 'people.change',
    summary: 'Resets the second factor of somebody who lost it; not one’s own',
    params,
    answer: accountView,
    status: 200,
    handle: async ({ params: { personId }, caller }) => {
      await resetSecondFactor(parts, personId, caller.person.id)
      return readAccount(parts, personId)
    },
  }),
  route({
    method: 'get',
    path: '/api/accounts/:personId/sessions',
    action: 'accounts.read',
    summary: 'Where somebody is signed in',
    params,
    answer: z.object({ sessions: z.array(ownSession) }),
    handle: async ({ params: { personId }, caller }) => {
      await readAccount(parts, personId)
      return { sessions: await listSessions(parts, personId, caller.sessionId) }
    },
  }),
  route({
    method: 'delete',
    path: '/api/accounts/:personId/sessions',
    action: 'people.change',
    summary: 'Signs somebody out everywhere',
    params,
    answer: accountView,
    status: 200,
    handle: async ({ params: { personId }, caller }) => {
      await readAccount(parts, personId)
      await endSessionsOf(parts, personId, caller.person.id, caller.sessionId)
      return readAccount(parts, personId)
    },
  }),
]
