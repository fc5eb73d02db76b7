/** Back-tests: what a draft of a limit would have done over stored figures. SI units; times ISO 8601 UTC. */
import { z } from 'zod'
import { condition, quantityKey, subjectKind } from './limit.ts'

const time = z.iso.datetime()

/** A draft over stored figures. */
export const backTestQuestion = z.strictObject({
  subjectKind,
  subjectId: z.number().int().positive(),
  condition,
  days: z.union([z.literal(7), z.literal(30), z.literal(365)]),
  /** Shifts of the first comparison's raise and clear together to lay beside it, SI. */
  shifts: z.array(z.number()).max(8).default([]),
})
export type BackTestQuestion = z.infer<typeof backTestQuestion>

export const backTestEpisode = z.object({
  raisedAt: time,
  /** Null: it would still be active at the end. */
  clearedAt: time.nullable(),
  seconds: z.number(),
  /** Null for a bearing. */
  extreme: z.number().nullable(),
  extremeAt: time,
})
export const backTestRun = z.object({
  raise: z.number().nullable(),
  clear: z.number().nullable(),
  count: z.number().int(),
  activeSeconds: z.number(),
  aWeek: z.number(),
  episodes: z.array(backTestEpisode),
})
export const backTestView = z.object({
  from: time,
  to: time,
  quantity: quantityKey,
  /** What the words "cannot show seas that were not measured" stand on. */
  judgedSeconds: z.number(),
  missingSeconds: z.number(),
  gaps: z.array(z.object({ from: time, to: time })),
  /** Days packed before this quantity was kept: they stand among the gaps. */
  daysWithoutFigure: z.number().int(),
  /** Days packed before its ± was kept: there the value alone clears. */
  daysWithoutError: z.number().int(),
  /** Part of the record is invented for the demonstration. */
  isInvented: z.boolean(),
  draft: backTestRun,
  others: z.array(backTestRun),
  /** For the drawing: extremes by step, rising in time; a step without figures is missing. */
  stepSeconds: z.number().int(),
  points: z.array(z.object({ at: time, least: z.number(), most: z.number() })),
})
export type BackTestView = z.infer<typeof backTestView>
