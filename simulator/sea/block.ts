/**
 * One stationary stretch of the sea at a station: Gaussian, periodic over its own length, every frequency carried by
 * many directions with phases of their own, so that crests are short as in a real sea. Its phases depend on the
 * block's name alone; sensors may be added without changing the sea.
 */
import { radiansFromEast } from '../../shared/directions.ts'
import { pressureResponse, waveNumber } from '../../shared/waves/dispersion.ts'
import { spectralVariances } from './frequencySpectrum.ts'
import { realSeries, type OneSidedSpectrum } from './inverseTransform.ts'
import type { SeaState } from './nearshore.ts'
import { hashText, uniforms } from './random.ts'
import { inverseSpreading } from './spreading.ts'

export interface SeaSensor {
  kind: 'pressure' | 'surface'
  east: number
  north: number
  heightAboveBed: number
}

export interface BlockWanted {
  /** Names the phases. */
  name: string
  state: SeaState
  sampleRate: number
  /** Power of two. */
  length: number
  sensors: SeaSensor[]
  /** Seconds by which each sensor's values are later than their stamps say (0 for a good clock). */
  clockOffsets: number[]
}

const highestFrequency = 0.75
const directionsPerFrequency = 24

/** One train of waves to be laid into the spectra: variance by frequency, directions by chance. */
interface Train {
  name: string
  variances: Float64Array
  /** Radians anticlockwise from east, toward, for a share of the energy. */
  direction: (u: number) => number
}

/** Metres of surface, or of equivalent head at a pressure sensor; one series a sensor, mean zero. */
export function makeBlock(wanted: BlockWanted): Float64Array[] {
  const resolution = wanted.sampleRate / wanted.length
  const highest = Math.min(highestFrequency, 0.45 * wanted.sampleRate)
  const trains = [...wanted.state.systems.map((system) => windWaves(system, resolution, highest))]
  trains.push(longWaves(wanted.state.surgeHeight, resolution, highest))
  const count = trains[0].variances.length
  const spectra = wanted.sensors.map(() => ({ real: new Float64Array(count), imaginary: new Float64Array(count) }))
  for (const train of trains) layTrain(train, wanted, resolution, spectra)
  respond(wanted, resolution, spectra)
  return realSeries(spectra, wanted.length)
}

function windWaves(system: SeaState['systems'][number], resolution: number, highest: number): Train {
  const spreading = inverseSpreading(system.directionalSpread)
  const mean = radiansFromEast(system.toward)
  return {
    name: system.key,
    variances: spectralVariances(system, resolution, highest),
    direction: (u) => mean + spreading(u),
  }
}

/** Long waves run every way along and off the coast: flat over 0.006 to 0.03 Hz, all directions alike. */
function longWaves(height: number, resolution: number, highest: number): Train {
  const variances = new Float64Array(Math.floor(highest / resolution) + 1)
  const first = Math.ceil(0.006 / resolution)
  const last = Math.floor(0.03 / resolution)
  variances.fill(height ** 2 / 16 / (last - first + 1), first, last + 1)
  return { name: 'surge', variances, direction: (u) => 2 * Math.PI * u }
}

/** Adds a train's surface elevation: each direction the same share of energy, spaced by quantiles with a jitter. */
function layTrain(train: Train, wanted: BlockWanted, resolution: number, spectra: OneSidedSpectrum[]): void {
  const chance = uniforms(hashText(`${wanted.name}/${train.name}`))
  const { sensors, state } = wanted
  for (let k = 1; k < train.variances.length; k++) {
    if (train.variances[k] === 0) continue
    const wavenumber = waveNumber(2 * Math.PI * k * resolution, state.waterDepth)
    const amplitude = Math.sqrt((2 * train.variances[k]) / directionsPerFrequency)
    for (let n = 0; n < directionsPerFrequency; n++) {
      const direction = train.direction((n + chance()) / directionsPerFrequency)
      const phase = 2 * Math.PI * chance()
      const east = wavenumber * Math.cos(direction)
      const north = wavenumber * Math.sin(direction)
      for (let m = 0; m < sensors.length; m++) {
        const there = phase - east * sensors[m].east - north * sensors[m].north
        spectra[m].real[k] += amplitude * Math.cos(there)
        spectra[m].imaginary[k] += amplitude * Math.sin(there)
      }
    }
  }
}

/** Turns surface into what each sensor feels, and turns its phases by what its clock is off. */
function respond(wanted: BlockWanted, resolution: number, spectra: OneSidedSpectrum[]): void {
  const { waterDepth } = wanted.state
  wanted.sensors.forEach((sensor, m) => {
    const offset = wanted.clockOffsets[m]
    if (sensor.kind === 'surface' && offset === 0) return
    const { real, imaginary } = spectra[m]
    for (let k = 1; k < real.length; k++) {
      const omega = 2 * Math.PI * k * resolution
      const gain =
        sensor.kind === 'surface'
          ? 1
          : pressureResponse(waveNumber(omega, waterDepth), waterDepth, sensor.heightAboveBed)
      const c = gain * Math.cos(omega * offset)
      const s = gain * Math.sin(omega * offset)
      ;[real[k], imaginary[k]] = [real[k] * c - imaginary[k] * s, real[k] * s + imaginary[k] * c]
    }
  })
}
