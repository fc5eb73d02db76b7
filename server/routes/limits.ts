import { z } from 'zod'
import { presentQuantity, quantities } from '../../shared/alerts/quantities.ts'
import { shelving, withReason, withReasonAndConsent } from '../../shared/schemas/alert.ts'
import { backTestQuestion, backTestView } from '../../shared/schemas/backTest.ts'
import {
  limitChange,
  limitDraft,
  limitSubject,
  limitView,
  limitWithHistory,
  quantityView,
} from '../../shared/schemas/limit.ts'
import type { Parts } from '../config/parts.ts'
import { officeOf } from '../presenters/office.ts'
import { resetLimit, returnToService, shelveLimit, takeOutOfService, unshelveLimit } from '../services/alerts.ts'
import type { Office } from '../services/alerts.ts'
import { askBackTest, changeLimit, createLimit, listLimits, listSubjects, readLimit, readLimitHistory, retireLimit } from '../services/limits.ts' // prettier-ignore
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { consentDeadline, consentIn } from './secondPerson.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const limitInPath = z.object({ limitId: idInPath })
/** A year of several quantities takes its time on a busy machine. */
const backTestDeadline = 20_000

type Act = (parts: Parts, office: Office, limitId: number, by: { personId: number; note: string }) => Promise<unknown>

/** Acts that need a reason and answer the limit as it then stands. */
const act = (
  parts: Parts,
  name: string,
  action: 'limits.change' | 'alerts.shelve',
  summary: string,
  work: Act,
): Route =>
  route({
    method: 'post',
    path: `/api/limits/:limitId/${name}`,
    action,
    summary,
    params: limitInPath,
    body: withReason,
    answer: limitView,
    async handle({ params: { limitId }, body, caller }) {
      await work(parts, await officeOf(parts), limitId, { personId: caller.person.id, note: body.reason })
      return readLimit(parts, limitId)
    },
  })

export const limitRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/limits',
    action: 'limits.read',
    summary: 'All limits that are not retired, with their state and newest value',
    answer: z.array(limitView),
    handle: () => listLimits(parts),
  }),
  route({
    method: 'get',
    path: '/api/limits/:limitId',
    action: 'limits.read',
    summary: 'One limit with all its versions, newest first',
    params: limitInPath,
    answer: limitWithHistory,
    handle: ({ params }) => readLimitHistory(parts, params.limitId),
  }),
  route({
    method: 'get',
    path: '/api/quantities',
    action: 'limits.read',
    summary: 'Everything a limit may be set on',
    answer: z.array(quantityView),
    handle: async () => quantities.map(presentQuantity),
  }),
  route({
    method: 'get',
    path: '/api/limitSubjects',
    action: 'limits.read',
    summary: 'Stations, places and the program itself, each with the quantities that a limit may be set on',
    answer: z.array(limitSubject),
    handle: () => listSubjects(),
  }),
  route({
    method: 'post',
    path: '/api/limits',
    action: 'limits.change',
    summary: 'Set a limit; the first wave limit that needs a station brings one on stale data with it',
    body: limitDraft,
    answer: limitView,
    status: 201,
    deadlineMilliseconds: consentDeadline,
    async handle({ body, caller, request }) {
      const consent = await consentIn(parts, body, caller, request)
      const limitId = await createLimit(parts, await officeOf(parts), { ...body, consent }, caller.person.id)
      return readLimit(parts, limitId)
    },
  }),
  route({
    method: 'put',
    path: '/api/limits/:limitId',
    action: 'limits.change',
    summary: 'Put a new version in force; needs If-Match with the version of the limit',
    params: limitInPath,
    body: limitChange,
    answer: limitView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { limitId }, body, caller, request }) {
      const version = versionIn(request)
      const consent = await consentIn(parts, body, caller, request)
      const change = { limitId, version, change: { ...body, consent }, personId: caller.person.id }
      await changeLimit(parts, await officeOf(parts), change)
      return readLimit(parts, limitId)
    },
  }),
  route({
    method: 'delete',
    path: '/api/limits/:limitId',
    action: 'limits.change',
    summary: 'Retire a limit, with a reason; it is kept with its alerts; needs If-Match',
    params: limitInPath,
    body: withReasonAndConsent,
    answer: limitView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { limitId }, body, caller, request }) {
      const version = versionIn(request)
      const consent = await consentIn(parts, body, caller, request)
      const order = { limitId, version, reason: body.reason, consent, personId: caller.person.id }
      await retireLimit(parts, await officeOf(parts), order)
      return readLimit(parts, limitId)
    },
  }),
  route({
    method: 'post',
    path: '/api/limits/:limitId/shelve',
    action: 'alerts.shelve',
    summary: 'Put a limit on the shelf, at most for one watch; an urgent one needs a second person or a written reason',
    params: limitInPath,
    body: shelving,
    answer: limitView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { limitId }, body, caller, request }) {
      const order = { ...body, consent: await consentIn(parts, body, caller, request) }
      await shelveLimit(parts, await officeOf(parts), limitId, order, caller.person.id)
      return readLimit(parts, limitId)
    },
  }),
  act(parts, 'unshelve', 'alerts.shelve', 'Take a limit off the shelf; it is asked afresh', unshelveLimit),
  act(parts, 'reset', 'alerts.shelve', 'Let go an alert that has latched', resetLimit),
  route({
    method: 'post',
    path: '/api/limits/:limitId/takeOutOfService',
    action: 'limits.change',
    summary: 'Take a limit out of service; an urgent one needs a second person or a written reason',
    params: limitInPath,
    body: withReasonAndConsent,
    answer: limitView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { limitId }, body, caller, request }) {
      const consent = await consentIn(parts, body, caller, request)
      const by = { personId: caller.person.id, note: body.reason, consent }
      await takeOutOfService(parts, await officeOf(parts), limitId, by)
      return readLimit(parts, limitId)
    },
  }),
  act(parts, 'returnToService', 'limits.change', 'Put a limit back in service; it is asked afresh', returnToService),
  route({
    method: 'post',
    path: '/api/backTests',
    // It changes nothing, but only who may set a limit has a draft to try.
    action: 'limits.change',
    summary: 'A draft over the stored figures of the last 7, 30 or 365 days',
    body: backTestQuestion,
    answer: backTestView,
    deadlineMilliseconds: backTestDeadline,
    async handle({ body }) {
      const { timeZone } = await officeOf(parts)
      return askBackTest(parts, timeZone, body)
    },
  }),
]
