/**
 * A section through a beach, water to the left: bed by its two slopes, still water, set-up, run-up and a breaker of the given height. The
 * form of the waves is schematic, heights are drawn larger than distances by a stated factor. Pure; metres in, pixels out.
 */
import { niceLength } from './planFrame.ts'
import { polyline, round2 } from './polar.ts'
import type { Point } from './polar.ts'

export interface BeachProfile {
  /** Significant breaker height, m; null: cannot be determined. */
  breakerHeight: number | null
  /** Above still water, m. */
  setUp: number | null
  runUp: number | null
  nearshoreSlope: number
  foreshoreSlope: number
  isPlunging: boolean
}

export interface BeachLayout {
  bed: string
  ground: string
  /** Outline of the water's surface and the filled water under it. */
  surface: string
  water: string
  still: { y: number; to: number }
  breaker: { x: number; top: number; trough: number } | null
  setUp: { x: number; y: number } | null
  runUp: Point | null
  /** Pixels a metre up over pixels a metre along. */
  exaggeration: number
  bar: { metres: number; length: number }
  upBar: { metres: number; length: number }
}

/** Depth at breaking is about the height over this: where the breaker stands in the drawing. */
const breakerIndex = 0.8

export function beachLayout(profile: BeachProfile, width: number, height: number, isPhone: boolean): BeachLayout {
  const { breakerHeight, nearshoreSlope, foreshoreSlope, isPlunging } = profile
  const drawn = Math.max(0.3, breakerHeight ?? 1)
  const [setUp, runUp] = [Math.max(0, profile.setUp ?? 0), Math.max(0, profile.runUp ?? 0)]
  const breakingDistance = drawn / breakerIndex / nearshoreSlope
  const span = Math.max(breakingDistance / 0.43, (runUp / foreshoreSlope) * 3.6, 20)
  const shore = span * 0.68
  const perMetreAlong = width / span
  const stillY = height * (isPhone ? 0.55 : 0.49)
  // Highest thing with its words above it must fit, and so must the trough below.
  const perMetreUp = Math.min(
    (stillY - (isPhone ? 62 : 78)) / Math.max(runUp, drawn * 0.62),
    (height - stillY - 26) / (drawn * 0.6 + 1.2),
  )
  const x = (metres: number): number => metres * perMetreAlong
  const y = (metres: number): number => stillY - metres * perMetreUp
  const bed = (at: number): number => {
    const off = at - shore
    const bar = 0.15 * drawn * Math.exp(-(((off + breakingDistance * 0.85) / (breakingDistance * 0.2 + 1)) ** 2))
    return off > 0 ? off * foreshoreSlope : off * nearshoreSlope + bar
  }
  const step = span / 160
  const profilePoints: Point[] = []
  for (let at = 0; at <= span + step / 2; at += step) profilePoints.push([x(at), y(bed(at))])
  const bottomed = (points: readonly Point[]): string => `${polyline(points)}L${round2(width)} ${height}L0 ${height}Z`

  const breakAt = Math.max(span * 0.1, shore - breakingDistance + span * 0.02)
  const wave = drawn * perMetreUp
  const before: Point[] = []
  const waveLength = span * 0.3
  for (let at = 0; at <= breakAt + step / 2; at += step) {
    const phase = ((breakAt - at) * 2 * Math.PI) / waveLength
    const growth = 0.82 + 0.18 * Math.exp((at - breakAt) / (span / 6))
    const form = 0.5 * Math.cos(phase) + 0.11 * Math.cos(2 * phase)
    before.push([x(at), y(growth * drawn * form)])
  }
  const crest = before[before.length - 1] ?? [0, y(0)]
  const behind = Math.min(shore - step, breakAt + (wave * 1.75) / perMetreAlong)
  const after: Point[] = []
  for (let at = behind; at <= span; at += step) {
    const share = Math.min(1, Math.max(0, (at - behind) / (shore + setUp / foreshoreSlope - behind)))
    const ripple = 0.1 * drawn * (1 - share) * Math.cos((at - behind) / (span / 50)) * Math.exp(-share * 1.2)
    const level = setUp * share ** 1.2 + ripple
    if (level < bed(at)) break
    after.push([x(at), y(level)])
  }
  const first = after[0] ?? [x(behind), y(0)]
  const q = (u: number, v: number): string => `${round2(crest[0] + u * wave)} ${round2(crest[1] + v * wave)}`
  const lip = isPlunging
    ? `C${q(0.22, -0.05)} ${q(0.66, -0.02)} ${q(0.8, 0.5)}C${q(0.68, 0.26)} ${q(0.46, 0.2)} ${q(0.36, 0.36)}C${q(0.27, 0.5)} ${q(0.46, 0.7)} ${q(0.86, 0.7)}C${q(1.2, 0.68)} ${q(1.4, 0.5)} ${first.map(round2).join(' ')}`
    : `C${q(0.2, 0.02)} ${q(0.5, 0.42)} ${q(1, 0.52)}L${first.map(round2).join(' ')}`
  const surface = `${polyline(before)}${lip}${polyline(after).replace(/^M/, 'L')}`
  const shoreEnd = after.at(-1)?.[0] ?? x(shore)
  const under = profilePoints.filter(([at]) => at <= shoreEnd).reverse()
  const trough = Math.max(...before.map(([, level]) => level))
  const bracketX = crest[0] - (isPhone ? 16 : 26)
  const metresAlong = niceLength(span * 0.2)
  const metresUp = niceLength((height * 0.2) / perMetreUp)
  return {
    bed: polyline(profilePoints),
    ground: bottomed(profilePoints),
    surface,
    water: `${surface}${polyline(under).replace(/^M/, 'L')}Z`,
    still: { y: y(0), to: x(shore) },
    breaker: breakerHeight === null ? null : { x: bracketX, top: crest[1], trough },
    setUp: profile.setUp === null ? null : { x: x(shore) - 14, y: y(setUp) },
    runUp: profile.runUp === null ? null : [x(shore + runUp / foreshoreSlope), y(runUp)],
    exaggeration: perMetreUp / perMetreAlong,
    bar: { metres: metresAlong, length: x(metresAlong) },
    upBar: { metres: metresUp, length: metresUp * perMetreUp },
  }
}
