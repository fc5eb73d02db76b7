import { z } from 'zod'
import { ownSession, passphraseChange } from '../../shared/schemas/account.ts'
import { preferences, preferencesChange } from '../../shared/schemas/preferences.ts'
import type { Parts } from '../config/parts.ts'
import { changePassphrase, changePreferences } from '../services/people/own.ts'
import { endOneSession, endSessionsOf, listSessions } from '../services/sessions/own.ts'
import { counted } from './proof.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const slow = 20_000

export const ownAccountRoutes = (parts: Parts): Route[] => [
  route({
    method: 'patch',
    path: '/api/profile/preferences',
    action: 'profile.change',
    summary: 'How the own screens look: units, times, display, keys; each choice by itself',
    body: preferencesChange,
    answer: preferences,
    handle: ({ body, caller }) => changePreferences(parts, caller.person.id, body),
  }),
  route({
    method: 'put',
    path: '/api/profile/passphrase',
    action: 'profile.change',
    summary: 'Another passphrase, proven by the present one; signs out everywhere else',
    body: passphraseChange,
    deadlineMilliseconds: slow,
    handle: (asked) =>
      counted(parts, asked, () => changePassphrase(parts, asked.caller.person.id, asked.body, asked.caller.sessionId)),
  }),
  route({
    method: 'get',
    path: '/api/profile/sessions',
    action: 'profile.read',
    summary: 'Where one is signed in oneself',
    answer: z.object({ sessions: z.array(ownSession) }),
    handle: async ({ caller }) => ({ sessions: await listSessions(parts, caller.person.id, caller.sessionId) }),
  }),
  route({
    method: 'delete',
    path: '/api/profile/sessions',
    action: 'profile.change',
    summary: 'Signs out everywhere else',
    handle: async ({ caller }) => {
      await endSessionsOf(parts, caller.person.id, caller.person.id, caller.sessionId)
    },
  }),
  route({
    method: 'delete',
    path: '/api/profile/sessions/:sessionId',
    action: 'profile.change',
    summary: 'Signs out on one other device',
    params: z.object({ sessionId: z.string().min(1).max(43) }),
    handle: ({ params, caller }) => endOneSession(parts, caller.person.id, params.sessionId, caller.person.id),
  }),
]
