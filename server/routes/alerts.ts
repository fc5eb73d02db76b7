import { z } from 'zod'
import { acknowledgement, acknowledgementAnswer, alertBoard, alertDetail, alertHistory, alertList, alertPerformance, alertView, drillOrder, shelving } from '../../shared/schemas/alert.ts' // prettier-ignore
import type { Parts } from '../config/parts.ts'
import { officeOf } from '../presenters/office.ts'
import { acknowledgeAlert, beginDrill, endDrill, listAlerts, measurePerformance, readAlert, readAlertDetail, readAlertHistory, readBoard, shelveLimit } from '../services/alerts.ts' // prettier-ignore
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'
import { consentDeadline, consentIn } from './secondPerson.ts'

const alertInPath = z.object({ alertId: idInPath })
const wholeNumber = (least: number, most: number, usual: number) =>
  z.coerce.number().int().min(least).max(most).default(usual)
const dayMs = 86_400_000

export const alertRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/alerts',
    action: 'alerts.read',
    summary: 'What is open, in the order in which it is shown, with counts and what was not judged',
    answer: alertBoard,
    handle: () => readBoard(parts),
  }),
  route({
    method: 'get',
    path: '/api/alerts/past',
    action: 'alerts.read',
    summary: 'Alerts raised in the last days, newest first, open or not',
    query: z.object({
      days: wholeNumber(1, 400, 7),
      before: z.coerce.number().int().positive().optional(),
      limitId: z.coerce.number().int().positive().optional(),
    }),
    answer: alertList,
    handle: ({ query: { days, before, limitId } }) =>
      listAlerts(parts, {
        since: new Date(parts.clock.now().getTime() - days * dayMs),
        before: before ?? null,
        limitId: limitId ?? null,
      }),
  }),
  route({
    method: 'get',
    path: '/api/alerts/performance',
    action: 'alertPerformance.read',
    summary: "Alert rates, floods, chattering, stale ones and times to acknowledge against the standard's targets",
    query: z.object({ days: wholeNumber(1, 400, 30) }),
    answer: alertPerformance,
    handle: ({ query }) => measurePerformance(parts, query.days),
  }),
  route({
    method: 'get',
    path: '/api/alerts/:alertId',
    action: 'alerts.read',
    summary: 'One alert with its timeline and who was told',
    params: alertInPath,
    answer: alertDetail,
    handle: async ({ params }) => readAlertDetail(parts, await officeOf(parts), params.alertId),
  }),
  route({
    method: 'get',
    path: '/api/alerts/:alertId/history',
    action: 'alerts.read',
    summary: "The alert's quantity over the last hours, until it closed",
    params: alertInPath,
    query: z.object({ hours: wholeNumber(1, 72, 12) }),
    answer: alertHistory,
    handle: ({ params, query }) => readAlertHistory(parts, params.alertId, query.hours),
  }),
  route({
    method: 'post',
    path: '/api/alerts/:alertId/acknowledge',
    action: 'alerts.acknowledge',
    summary: 'Acknowledge this very alert; whoever comes second is told who did it and when',
    params: alertInPath,
    body: acknowledgement,
    answer: acknowledgementAnswer,
    async handle({ params: { alertId }, body, caller }) {
      const by = { personId: caller.person.id, note: body.note }
      const isFirst = await acknowledgeAlert(parts, await officeOf(parts), alertId, by)
      return { isFirst, alert: await readAlert(parts, alertId) }
    },
  }),
  route({
    method: 'post',
    path: '/api/alerts/:alertId/shelve',
    action: 'alerts.shelve',
    summary: "Put the alert's limit on the shelf",
    params: alertInPath,
    body: shelving,
    answer: alertView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { alertId }, body, caller, request }) {
      const { limitId } = await readAlert(parts, alertId)
      const order = { ...body, consent: await consentIn(parts, body, caller, request) }
      await shelveLimit(parts, await officeOf(parts), limitId, order, caller.person.id)
      return readAlert(parts, alertId)
    },
  }),
  route({
    method: 'post',
    path: '/api/drills',
    action: 'drills.change',
    summary: 'Raise an exercise alert of a limit, marked everywhere and left out of statistics',
    body: drillOrder,
    answer: alertView,
    status: 201,
    async handle({ body, caller }) {
      const alertId = await beginDrill(parts, await officeOf(parts), { ...body, personId: caller.person.id })
      return readAlert(parts, alertId)
    },
  }),
  route({
    method: 'post',
    path: '/api/drills/:alertId/end',
    action: 'drills.change',
    summary: 'End a drill',
    params: alertInPath,
    answer: alertView,
    async handle({ params: { alertId }, caller }) {
      await endDrill(parts, await officeOf(parts), alertId, caller.person.id)
      return readAlert(parts, alertId)
    },
  }),
]
