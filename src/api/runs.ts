import { z } from 'zod'
import { confirmedOffset } from '../../shared/schemas/clockOffset.ts'
import type { ConfirmedOffset, OffsetConfirmation } from '../../shared/schemas/clockOffset.ts'
import { qualityTest } from '../../shared/schemas/estimate.ts'
import type { QualityTest } from '../../shared/schemas/estimate.ts'
import { longJobView } from '../../shared/schemas/longJob.ts'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import { runChoices, runComparison, runView } from '../../shared/schemas/run.ts'
import type { RunChoices, RunComparison, RunOrder, RunView } from '../../shared/schemas/run.ts'
import { request } from './request.ts'

const of = (stationId: number): string => `/api/stations/${stationId}`

export const readRuns = (stationId: number): Promise<RunView[]> =>
  request('GET', `${of(stationId)}/runs`, z.array(runView))
export const readRunChoices = (stationId: number): Promise<RunChoices> =>
  request('GET', `${of(stationId)}/runs/choices`, runChoices)
export const orderRun = (stationId: number, order: RunOrder): Promise<RunView> =>
  request('POST', `${of(stationId)}/runs`, runView, order)
export const readComparison = (stationId: number, runId: number): Promise<RunComparison> =>
  request('GET', `${of(stationId)}/runs/${runId}/comparison`, runComparison)
export const cancelJob = (jobId: number): Promise<LongJobView> =>
  request('POST', `/api/jobs/${jobId}/cancel`, longJobView)

export const readClockOffsets = (stationId: number): Promise<ConfirmedOffset[]> =>
  request('GET', `${of(stationId)}/clockOffsets`, z.array(confirmedOffset))
/** One test a sensor, over a week. */
export const readLevelDrift = (stationId: number): Promise<QualityTest[]> =>
  request('GET', `${of(stationId)}/levelDrift`, z.array(qualityTest))
export const confirmClockOffset = (stationId: number, order: OffsetConfirmation): Promise<ConfirmedOffset> =>
  request('POST', `${of(stationId)}/clockOffsets`, confirmedOffset, order)
