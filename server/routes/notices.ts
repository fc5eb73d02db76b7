import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import { flagSet, flagSetChange, noticeDraft, noticeExtension, noticeView } from '../../shared/schemas/placeNotice.ts'
import type { Parts } from '../config/parts.ts'
import { noticeOfficeOf } from '../presenters/place.ts'
import { extendNotice, listNotices, readNotice, setNotice, withdrawNotice } from '../services/notices.ts'
import { changeSetting, settingInForce } from '../services/settings.ts'
import { inTransaction } from '../services/transaction.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { placeInPath } from './places.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const noticeInPath = z.object({ noticeId: idInPath })
const days = z
  .string()
  .regex(/^\d{1,4}$/)
  .transform(Number)
  .pipe(z.number().min(0).max(3660))

export const noticeRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/places/:placeId/notices',
    action: 'places.read',
    summary: 'Flags, closures and advisories of a place, newest first, with those withdrawn lately',
    params: placeInPath,
    query: z.object({ days: days.default(30) }),
    answer: z.object({ notices: z.array(noticeView) }),
    async handle({ params, query }) {
      const { warnMs } = await noticeOfficeOf(parts)
      return { notices: await listNotices(parts, params.placeId, { days: query.days, warnMs }) }
    },
  }),
  route({
    method: 'post',
    path: '/api/places/:placeId/notices',
    action: 'notices.change',
    summary: 'Set a flag, a closure or an advisory, with a reason; partners at places of their team',
    params: placeInPath,
    body: noticeDraft,
    answer: noticeView,
    status: 201,
    async handle({ params: { placeId }, body, caller }) {
      const office = await noticeOfficeOf(parts)
      const flags = await settingInForce(parts, 'beachFlags')
      const id = await setNotice(parts, office, { placeId, draft: body, flags, author: caller.person })
      return readNotice(parts, id, office.warnMs)
    },
  }),
  route({
    method: 'put',
    path: '/api/notices/:noticeId',
    action: 'notices.change',
    summary: 'Extend a notice, with a reason; needs If-Match',
    params: noticeInPath,
    body: noticeExtension,
    answer: noticeView,
    async handle({ params: { noticeId }, body, caller, request }) {
      const office = await noticeOfficeOf(parts)
      const change = { noticeId, version: versionIn(request), author: caller.person, extension: body }
      await extendNotice(parts, office, change)
      return readNotice(parts, noticeId, office.warnMs)
    },
  }),
  route({
    method: 'post',
    path: '/api/notices/:noticeId/withdraw',
    action: 'notices.change',
    summary: 'Withdraw a notice, with a reason; needs If-Match',
    params: noticeInPath,
    body: withReason,
    answer: noticeView,
    async handle({ params: { noticeId }, body, caller, request }) {
      const office = await noticeOfficeOf(parts)
      const change = { noticeId, version: versionIn(request), author: caller.person, reason: body.reason }
      await withdrawNotice(parts, office, change)
      return readNotice(parts, noticeId, office.warnMs)
    },
  }),
  route({
    method: 'get',
    path: '/api/beachFlags',
    action: 'places.read',
    summary: 'The flag set of this site, with its wording',
    answer: flagSet,
    handle: () => settingInForce(parts, 'beachFlags'),
  }),
  route({
    method: 'put',
    path: '/api/beachFlags',
    action: 'places.change',
    summary: 'Put another flag set in force, with a reason; flags that fly keep what they meant',
    body: flagSetChange,
    answer: flagSet,
    async handle({ body, caller }) {
      const by = { personId: caller.person.id, reason: body.reason }
      await inTransaction(parts.sequelize, (transaction) =>
        changeSetting(parts, 'beachFlags', body.flagSet, by, transaction),
      )
      return settingInForce(parts, 'beachFlags')
    },
  }),
]
