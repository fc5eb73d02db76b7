/** A sea of one regular wave: recognised by a line that holds nearly all energy, fitted over the whole record. */
import type { ArraySpectra } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import { pressureResponse, waveNumber } from './dispersion.ts'
import type { PreparedArray } from './preparedArray.ts'
import { metresPerDecibar } from './arraySpectra.ts'
import { regularWave } from './regularWave.ts'
import { fitSinusoid } from './sinusoid.ts'
import type { SeaDoubts } from './describeSea.ts'
import type { TrainVector } from './trainVector.ts'
import type { ArrayWindow } from './window.ts'

/** Share of the energy that must stand in the line: a random sea of 20 minutes has at most a third within three bins. */
const leastLineShare = 0.75

export interface RegularSea {
  train: TrainVector
  doubts: SeaDoubts
}

/** Another cycle that fits nearly as well makes the vector a guess: one frequency alone cannot decide. */
const ambiguousFrom = 0.97

/** Null where the sea is not regular. */
export function findRegularSea(window: ArrayWindow, prepared: PreparedArray, spectra: ArraySpectra): RegularSea | null {
  const { fine, duration } = spectra
  const near = lineCandidate(spectra)
  if (near === null) return null
  const line = fitSinusoid(prepared.series, prepared.missing, window.sampleRate, near)
  const ordered = prepared.frame.order.map((n) => window.sensors[prepared.usable[n]])
  const omega = 2 * Math.PI * line.frequency
  const k = waveNumber(omega, window.waterDepth, window.settings.gravity)
  let m0 = 0
  ordered.forEach((sensor, m) => {
    const scale =
      sensor.kind === 'surface'
        ? 1
        : metresPerDecibar(window) / pressureResponse(k, window.waterDepth, sensor.heightAboveBed)
    m0 += (0.5 * scale * scale * (line.real[m] ** 2 + line.imag[m] ** 2)) / ordered.length
    turnBack(line.real, line.imag, m, omega * (sensor.clockOffset ?? 0))
    line.real[m] *= scale
    line.imag[m] *= scale
    line.residual[m] *= scale * scale
  })
  const { x, y } = prepared.frame
  const wave = regularWave(
    line,
    x,
    y,
    window.waterDepth,
    window.settings.gravity,
    fine.count > 0 ? prepared.series[0].length : 0,
  )
  if (!wave) return null
  const speed = 1 / Math.hypot(wave.x, wave.y)
  const direction = Math.atan2(wave.y, wave.x)
  const cos = Math.cos(direction)
  const sin = Math.sin(direction)
  const c2 = speed * speed
  const train: TrainVector = {
    direction,
    speed,
    measuredSpeed: speed,
    directionVariance: c2 * (sin * sin * wave.xx - 2 * sin * cos * wave.xy + cos * cos * wave.yy),
    logSpeedVariance: c2 * (cos * cos * wave.xx + 2 * sin * cos * wave.xy + sin * sin * wave.yy),
    cross: -c2 * (-sin * cos * wave.xx + (cos * cos - sin * sin) * wave.xy + sin * cos * wave.yy),
    spread: null,
    peak: line.frequency,
    peakDensity: m0 * duration,
    m0,
    samplingError: null,
    band: { from: line.frequency - 1 / duration, to: line.frequency + 1 / duration },
  }
  return {
    train,
    doubts: {
      lagResidualRms: wave.residual,
      runnerUp: null,
      ambiguous: wave.runnerUp > ambiguousFrom,
      unexplained: null,
      turns: [],
    },
  }
}

function turnBack(real: Float64Array, imag: Float64Array, m: number, angle: number): void {
  const r = real[m] * Math.cos(angle) + imag[m] * Math.sin(angle)
  imag[m] = imag[m] * Math.cos(angle) - real[m] * Math.sin(angle)
  real[m] = r
}

/** Frequency of the highest fine bin when the bins within 1.5 record lengths of it hold the energy; else null. */
function lineCandidate({ bands, fine, duration }: ArraySpectra): number | null {
  const noise = noiseDensity(bands)
  let total = 0
  let highest = 0
  for (let g = 0; g < bands.groups; g++) {
    total += Math.max(0, bands.density[g] - noise[g]) * bands.width[g]
    if (bands.density[g] > bands.density[highest]) highest = g
  }
  if (!(total > 0)) return null
  const centre = bands.frequency[highest]
  const reach = 2 / duration + bands.width[highest]
  let near = 0
  for (let g = 0; g < bands.groups; g++)
    if (Math.abs(bands.frequency[g] - centre) < reach + bands.width[g] / 2)
      near += Math.max(0, bands.density[g] - noise[g]) * bands.width[g]
  if (near < leastLineShare * total) return null
  return lineIn(fine, centre, reach)
}

function lineIn(fine: ArraySpectra['fine'], centre: number, reach: number): number | null {
  const from = Math.max(0, Math.floor((centre - reach - fine.first) / fine.step))
  const to = Math.min(fine.count - 1, Math.ceil((centre + reach - fine.first) / fine.step))
  const power = (bin: number) => fine.series.reduce((sum, s) => sum + s[2 * bin] ** 2 + s[2 * bin + 1] ** 2, 0)
  let best = from
  let sum = 0
  for (let bin = from; bin <= to; bin++) {
    sum += power(bin)
    if (power(bin) > power(best)) best = bin
  }
  const lobe = Math.ceil(1.2 * fine.padding) + 1
  let line = 0
  for (let bin = Math.max(from, best - lobe); bin <= Math.min(to, best + lobe); bin++) line += power(bin)
  return line >= 0.9 * sum ? fine.first + best * fine.step : null
}
