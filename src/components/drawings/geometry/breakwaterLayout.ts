/**
 * A section through a breakwater, sea to the left: to scale above the water both ways; a deep toe is cut off and said. Wave form and water
 * over the crest are schematic. Pure; metres in, pixels out.
 */
import { round2 } from './polar.ts'

export interface BreakwaterProfile {
  /** Above still water, m; below zero: the crest is under it. */
  freeCrest: number
  toeDepth: number
  /** Tangent of the seaward face; null: vertical. */
  slope: number | null
  /** At the toe, m; null: not known. */
  height: number | null
  goesOver: boolean
}

export interface BreakwaterLayout {
  body: string
  sea: string
  surface: string
  lee: { x: number; y: number; height: number }
  bedY: number
  stillY: number
  crestY: number
  bracketX: number
  crestX: number
  over: string[]
  drawnDepth: number
  perMetre: number
}

/** Deeper toes are cut off here, m. */
const mostDepth = 4.2
/** Width of the crest, m, schematic. */
const crestWidth = 3.8

export function breakwaterLayout(profile: BreakwaterProfile, width: number, height: number): BreakwaterLayout {
  const { freeCrest, slope, toeDepth, goesOver } = profile
  const depth = Math.min(toeDepth, mostDepth)
  const wave = Math.max(0.2, profile.height ?? 0.5)
  const above = Math.max(freeCrest, wave * 0.7, 0.5)
  const run = slope === null ? 0 : (Math.max(0, freeCrest) + depth) / slope
  const lee = 5
  const perMetre = Math.min((height - 76) / (above + depth + 0.2), (width * 0.74) / (run + crestWidth + lee + 9), 34)
  const bedY = height - 10
  const stillY = bedY - depth * perMetre
  const y = (metres: number): number => stillY - metres * perMetre
  const bodyWidth = (run + crestWidth + lee) * perMetre
  const left = Math.max(width * 0.1, (width - bodyWidth) * 0.42)
  const toeX = left
  const crestX = left + run * perMetre
  const crestEnd = crestX + crestWidth * perMetre
  const leeX = crestEnd + lee * perMetre
  const step = Math.min(1, Math.max(0.4, freeCrest * 0.4))
  const crestY = y(freeCrest)
  const body = `M${[
    [toeX, bedY],
    [crestX, crestY],
    [crestEnd, crestY],
    [crestEnd, crestY + step * perMetre],
    [crestEnd + 2 * perMetre, crestY + step * perMetre],
    [leeX, bedY],
  ]
    .map(([a, b]) => `${round2(a)} ${round2(b)}`)
    .join('L')}Z`
  const meets = slope === null ? crestX : toeX + (depth / slope) * perMetre
  const up = slope === null ? meets : Math.min(crestX, meets + ((wave * 0.4) / slope) * perMetre)
  const upY = slope === null ? y(wave * 0.45) : y(Math.min(freeCrest, wave * 0.4))
  const a = (share: number): number => round2(meets * share)
  const surface = `M0 ${round2(y(0))}C${a(0.18)} ${round2(y(wave * 0.47))} ${a(0.3)} ${round2(y(wave * 0.5))} ${a(0.42)} ${round2(y(wave * 0.05))}S${a(0.64)} ${round2(y(-wave * 0.37))} ${a(0.8)} ${round2(y(wave * 0.26))}Q${a(0.9)} ${round2(y(wave * 0.6))} ${round2(up)} ${round2(upY)}`
  const sea = `${surface}L${round2(meets)} ${round2(y(0))}L${round2(toeX)} ${bedY}H0Z`
  const m = (metres: number): number => round2(crestX + metres * perMetre)
  const over = goesOver
    ? [
        `M${m(0.2)} ${round2(crestY - 0.1 * perMetre)}Q${m(1.8)} ${round2(crestY - 0.9 * perMetre)} ${m(4.2)} ${round2(crestY + 0.8 * perMetre)}`,
        `M${m(0.3)} ${round2(crestY - 0.1 * perMetre)}Q${m(1.4)} ${round2(crestY - 0.5 * perMetre)} ${m(2.8)} ${round2(crestY - 0.05 * perMetre)}`,
      ]
    : []
  const waterlineLee = leeX - (depth / (depth + freeCrest - step)) * (leeX - crestEnd - 2 * perMetre)
  return {
    ...{ body, sea, surface, bedY, stillY, crestY, over, drawnDepth: depth, perMetre },
    lee: { x: Math.min(width, Math.max(crestEnd, waterlineLee)), y: stillY, height: bedY - stillY },
    bracketX: crestX - (slope === null ? 0.6 : 1.2) * perMetre,
    crestX,
  }
}
