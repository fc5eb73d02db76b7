import { dailyEmailChange, dailyEmailView, watchRulesChange, watchRulesView } from '../../shared/schemas/watchRules.ts'
import type { Parts } from '../config/parts.ts'
import { changeDailyEmail, changeWatchRules, readDailyEmail, readWatchRules } from '../services/settings/watchRules.ts'
import { versionIn } from './ifMatch.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

export const watchRulesRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/dailyEmail',
    action: 'dailyEmail.read',
    summary: 'When the daily e-mail goes out, and to whom',
    answer: dailyEmailView,
    handle: () => readDailyEmail(parts),
  }),
  route({
    method: 'put',
    path: '/api/dailyEmail',
    action: 'dailyEmail.change',
    summary: 'Another hour or list for the daily e-mail; needs If-Match with its version',
    body: dailyEmailChange,
    answer: dailyEmailView,
    handle: ({ body, caller, request }) =>
      changeDailyEmail(parts, { ...body, version: versionIn(request), personId: caller.person.id }),
  }),
  route({
    method: 'get',
    path: '/api/watchRules',
    action: 'watchRules.read',
    summary: 'Whether urgent limits ask for a second person, and how long a limit may lie on the shelf',
    answer: watchRulesView,
    handle: () => readWatchRules(parts),
  }),
  route({
    method: 'put',
    path: '/api/watchRules',
    action: 'watchRules.change',
    summary: 'Other rules of the watch; needs If-Match with their version',
    body: watchRulesChange,
    answer: watchRulesView,
    handle: ({ body, caller, request }) =>
      changeWatchRules(parts, { ...body, version: versionIn(request), personId: caller.person.id }),
  }),
]
