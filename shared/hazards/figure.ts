/**
 * A figure of a place: what every function of `shared/hazards` answers. SI units and radians; it carries its own ±, range of validity,
 * method, source and inputs, so that whoever reads it can see how it was made. "Cannot be determined" is a null value with a reason.
 */
import { z } from 'zod'

/** `1` is a pure number (slope, ratio, surf similarity). `m³/s/m` is a mean discharge over a metre of crest, `m³/m` one volume. */
export const figureUnit = z.enum(['m', 's', 'm/s', 'rad', '1', 'Hz', 'm²', 'm²/Hz', 'm³/s/m', 'm³/m'])
export type FigureUnit = z.infer<typeof figureUnit>

/** What went in. `sd` is one standard deviation, null where it is not known; `note` says where the value comes from. */
export const figureInput = z.object({
  name: z.string(),
  value: z.union([z.number(), z.string()]),
  unit: figureUnit.nullable(),
  sd: z.number().nullable(),
  note: z.string().nullable(),
})
export type FigureInput = z.infer<typeof figureInput>

/** One condition of the method's range of validity. `from` and `to` are null where that side is open. */
export const rangeCheck = z.object({
  name: z.string(),
  value: z.number(),
  unit: figureUnit,
  from: z.number().nullable(),
  to: z.number().nullable(),
  inside: z.boolean(),
})
export type RangeCheck = z.infer<typeof rangeCheck>

export const figureMethod = z.object({
  /** As people would say it: "mean value, armoured rubble slope". */
  name: z.string(),
  /** In one line, with the symbols of the source. */
  formula: z.string(),
  /** Author, year, equation. */
  source: z.string(),
  /** The formula or a constant in it was written down from memory and could not be held against the source. Said on the page. */
  fromMemory: z.boolean(),
  /** What the method leaves out or takes for granted, each a short sentence. */
  assumptions: z.array(z.string()),
})
export type FigureMethod = z.infer<typeof figureMethod>

export const figure = z.object({
  value: z.number().nullable(),
  unit: figureUnit,
  /** Why there is no value; null when there is one. */
  reason: z.string().nullable(),
  /** Words that belong to the value: "spilling to plunging", "from the port quarter, setting to starboard". */
  words: z.string().nullable(),
  /** One standard deviation, in the figure's unit. Null where `likely` says it better, or where an input's ± is not known. */
  sd: z.number().nullable(),
  /** The true value is within this about two times in three. Null where `sd` says it. */
  likely: z.object({ from: z.number(), to: z.number() }).nullable(),
  /** How ± or the likely range was found: what was carried through and what scatter of the method was added. */
  uncertaintyFrom: z.string(),
  /** `inRange` is false when any check fails: the value is shown with the reason, and is no better than a hint. */
  validity: z.object({ inRange: z.boolean(), checks: z.array(rangeCheck) }),
  method: figureMethod,
  inputs: z.array(figureInput),
})
export type Figure = z.infer<typeof figure>

/** A figure that has a value. */
export type DeterminedFigure = Figure & { value: number }

export const isDetermined = (one: Figure): one is DeterminedFigure => one.value !== null

/** What a method knows before it computes. */
export interface FigureFrame {
  unit: FigureUnit
  method: FigureMethod
  inputs: FigureInput[]
  checks: RangeCheck[]
}

interface Answer {
  value: number
  words?: string
  sd?: number | null
  likely?: { from: number; to: number } | null
  uncertaintyFrom: string
}

const validityOf = (checks: RangeCheck[]): Figure['validity'] => ({
  inRange: checks.every(({ inside }) => inside),
  checks,
})

/** Errors: RangeError for a value that is no number; a method refuses with `undetermined` instead. */
export function determined({ unit, method, inputs, checks }: FigureFrame, answer: Answer): DeterminedFigure {
  const { value, words = null, sd = null, likely = null, uncertaintyFrom } = answer
  if (!Number.isFinite(value)) throw new RangeError(`${method.name} gave ${value}`)
  return { value, unit, reason: null, words, sd, likely, uncertaintyFrom, validity: validityOf(checks), method, inputs }
}

/** `reason` says what is missing or out of reach, in words for the page. */
export function undetermined({ unit, method, inputs, checks }: FigureFrame, reason: string): Figure {
  return {
    ...{ value: null, unit, reason, words: null, sd: null, likely: null, uncertaintyFrom: 'no value' },
    ...{ validity: validityOf(checks), method, inputs },
  }
}

/** Is a value within a method's range? Bounds belong to it; null leaves that side open. */
export function check(
  name: string,
  value: number,
  unit: FigureUnit,
  from: number | null,
  to: number | null,
): RangeCheck {
  return { name, value, unit, from, to, inside: (from === null || value >= from) && (to === null || value <= to) }
}

/** `value` with its ± as an input of a figure. */
export function input(
  name: string,
  value: number | string,
  unit: FigureUnit | null,
  sd: number | null = null,
  note: string | null = null,
): FigureInput {
  return { name, value, unit, sd, note }
}
