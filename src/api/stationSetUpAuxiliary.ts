import { z } from 'zod'
import { auxiliaryOutcome, auxiliaryView } from '../../shared/schemas/stationSetUpAuxiliary.ts'
import type { AuxiliaryReadingGiven, AuxiliaryView } from '../../shared/schemas/stationSetUpAuxiliary.ts'
import { request } from './request.ts'

export type AuxiliaryOutcome = z.infer<typeof auxiliaryOutcome>

export const readAuxiliary = (stationId: number): Promise<AuxiliaryView[]> =>
  request('GET', `/api/stations/${stationId}/auxiliary`, z.array(auxiliaryView))

export const enterAuxiliary = (stationId: number, readings: AuxiliaryReadingGiven[]): Promise<AuxiliaryOutcome> =>
  request('POST', `/api/stations/${stationId}/auxiliary`, auxiliaryOutcome, { readings })
