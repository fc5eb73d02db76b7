import type { z } from 'zod'
import {
  acknowledgementAnswer,
  alertBoard,
  alertDetail,
  alertHistory,
  alertList,
  alertPerformance,
  alertView,
} from '../../shared/schemas/alert.ts'
import type {
  AlertBoard,
  AlertDetail,
  AlertHistory,
  AlertPerformance,
  AlertView,
  drillOrder,
  ReasonAndConsent,
  Shelving,
} from '../../shared/schemas/alert.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import type { LimitView } from '../../shared/schemas/limit.ts'
import { request } from './request.ts'

type DrillOrder = z.infer<typeof drillOrder>

export const readBoard = (): Promise<AlertBoard> => request('GET', '/api/alerts', alertBoard)

export const readAlert = (id: number): Promise<AlertDetail> => request('GET', `/api/alerts/${id}`, alertDetail)

export const readHistory = (id: number): Promise<AlertHistory> =>
  request('GET', `/api/alerts/${id}/history`, alertHistory)

/** Those that were raised in the last days, open or over, newest first. */
export const readPast = (days: number, before?: number) =>
  request('GET', `/api/alerts/past?days=${days}${before === undefined ? '' : `&before=${before}`}`, alertList)

export const acknowledge = (id: number, note: string | null): Promise<{ isFirst: boolean; alert: AlertView }> =>
  request('POST', `/api/alerts/${id}/acknowledge`, acknowledgementAnswer, { note })

const withReason = (limitId: number, act: string, reason: string): Promise<LimitView> =>
  request('POST', `/api/limits/${limitId}/${act}`, limitView, { reason })

export const shelve = (alertId: number, shelving: Shelving): Promise<AlertView> =>
  request('POST', `/api/alerts/${alertId}/shelve`, alertView, shelving)

export const unshelve = (limitId: number, reason: string): Promise<LimitView> => withReason(limitId, 'unshelve', reason)

/** Lets go what has latched. */
export const reset = (limitId: number, reason: string): Promise<LimitView> => withReason(limitId, 'reset', reason)

export const takeOut = (limitId: number, order: ReasonAndConsent): Promise<LimitView> =>
  request('POST', `/api/limits/${limitId}/takeOutOfService`, limitView, order)

export const putBack = (limitId: number, reason: string): Promise<LimitView> =>
  withReason(limitId, 'returnToService', reason)

export const beginDrill = (order: DrillOrder): Promise<AlertView> => request('POST', '/api/drills', alertView, order)

export const endDrill = (alertId: number): Promise<AlertView> =>
  request('POST', `/api/drills/${alertId}/end`, alertView)

export const readPerformance = (days: number): Promise<AlertPerformance> =>
  request('GET', `/api/alerts/performance?days=${days}`, alertPerformance)
