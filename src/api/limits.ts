import { z } from 'zod'
import type { ReasonAndConsent } from '../../shared/schemas/alert.ts'
import { backTestView } from '../../shared/schemas/backTest.ts'
import type { BackTestQuestion, BackTestView } from '../../shared/schemas/backTest.ts'
import { limitSubject, limitView, limitWithHistory } from '../../shared/schemas/limit.ts'
import type { LimitChange, LimitDraft, LimitSubject, LimitView } from '../../shared/schemas/limit.ts'
import { request } from './request.ts'

export type LimitWithHistory = z.infer<typeof limitWithHistory>

export const readLimits = (): Promise<LimitView[]> => request('GET', '/api/limits', z.array(limitView))

export const readLimit = (id: number): Promise<LimitWithHistory> =>
  request('GET', `/api/limits/${id}`, limitWithHistory)

/** What a limit may be set on. */
export const readSubjects = (): Promise<LimitSubject[]> => request('GET', '/api/limitSubjects', z.array(limitSubject))

export const createLimit = (draft: LimitDraft): Promise<LimitView> => request('POST', '/api/limits', limitView, draft)

export const changeLimit = (id: number, version: number, change: LimitChange): Promise<LimitView> =>
  request('PUT', `/api/limits/${id}`, limitView, change, version)

export const retireLimit = (id: number, version: number, order: ReasonAndConsent): Promise<LimitView> =>
  request('DELETE', `/api/limits/${id}`, limitView, order, version)

export const backTest = (question: BackTestQuestion): Promise<BackTestView> =>
  request('POST', '/api/backTests', backTestView, question)
