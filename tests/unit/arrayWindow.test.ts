import { describe, expect, it } from 'vitest'
import { arrayWindowOf } from '../../server/services/estimates/arrayWindow.ts'
import type { WindowQuestion } from '../../server/services/estimates/arrayWindow.ts'
import { inForce } from '../../server/services/estimates/timeline.ts'
import type { DeployedSensor } from '../../server/services/estimates/timeline.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'

const end = Date.UTC(2026, 11, 1, 12)
const hour = 3_600_000

const sensor = (sensorId: number, wanted: Partial<DeployedSensor> = {}): DeployedSensor => ({
  sensorId,
  letter: `S${sensorId}`,
  kind: 'surface',
  east: sensorId * 10,
  north: 0,
  heightAboveBed: 12,
  positionSd: 0.05,
  clockSd: 0.002,
  scale: 1,
  offset: 0,
  pressureKind: 'gauge',
  ...wanted,
})

/** An hour at 1 Hz of steady readings. */
function question(sensors: DeployedSensor[], value: number, wanted: Partial<WindowQuestion> = {}): WindowQuestion {
  const content = {
    windowSeconds: 1200,
    hopSeconds: 60,
    graceSeconds: 10,
    landSectors: [],
    estimate: defaultEstimateSettings,
  }
  return {
    windowEndsAt: end,
    deployment: { id: 1, validFrom: 0, waterDepth: 12, levelOfBed: -12, sensors },
    settings: { id: 1, validFrom: 0, content },
    clockOffsets: [],
    readings: { sampleRate: 1, startMs: end - hour, series: sensors.map(() => new Float64Array(3600).fill(value)) },
    tideLevel: null,
    airPressure: null,
    ...wanted,
  }
}

describe('the window given to the estimator', () => {
  it('is the last part of the readings, with the hour before it for the surge band', () => {
    const { window, surgeStartsAt } = arrayWindowOf(question([sensor(1), sensor(2)], 0.4))
    expect(window.series.map(({ length }) => length)).toEqual([1200, 1200])
    expect(window.surge?.level).toHaveLength(3600)
    expect(surgeStartsAt).toBe(end - hour)
    expect(window.waterDepth).toBeCloseTo(12.4, 9)
  })

  it('has no surge record when more than a twentieth of the hour is missing', () => {
    const asked = question([sensor(1)], 0)
    asked.readings.series[0].fill(NaN, 0, 200)
    expect(arrayWindowOf(asked)).toMatchObject({ surgeStartsAt: null })
    expect(arrayWindowOf(asked).window.surge).toBeUndefined()
  })

  it('counts samples from before the survey as missing: they belong to another geometry', () => {
    const asked = question([sensor(1)], 0)
    asked.deployment.validFrom = end - 600_000
    const [series] = arrayWindowOf(asked).window.series
    expect([...series].filter((value) => Number.isNaN(value))).toHaveLength(600)
    expect(series[599]).toBeNaN()
    expect(series[600]).toBe(0)
  })

  it('turns absolute pressure into gauge pressure with the barometer, else with the standard atmosphere', () => {
    const absolute = sensor(1, { kind: 'pressure', heightAboveBed: 0.5, pressureKind: 'absolute' })
    // 1 dbar is 10,000 Pa; the standard atmosphere is 101,325 Pa (ISO 2533).
    const low = arrayWindowOf(question([absolute], 22, { airPressure: 98_000 })).window
    expect(low.series[0][0]).toBeCloseTo(12.2, 9)
    expect(arrayWindowOf(question([absolute], 22)).window.series[0][0]).toBeCloseTo(22 - 10.1325, 9)
  })

  it('applies scale and offset of the instrument', () => {
    const { window } = arrayWindowOf(question([sensor(1, { scale: 2, offset: -0.5 })], 1))
    expect(window.series[0][0]).toBe(1.5)
  })

  it('hands on the clock offset that is in force for each sensor', () => {
    const offset = { sensorId: 2, sd: 0.01, recordedAt: 0 }
    const { window } = arrayWindowOf(
      question([sensor(1), sensor(2)], 0, {
        clockOffsets: [
          { ...offset, validFrom: 0, offsetSeconds: 0.1 },
          { ...offset, validFrom: end - 1, offsetSeconds: 0.3 },
          { ...offset, validFrom: end + 1, offsetSeconds: 0.9 },
        ],
      }),
    )
    expect(window.sensors.map(({ clockOffset }) => clockOffset)).toEqual([undefined, 0.3])
  })
})

describe('the version in force', () => {
  it('is the latest that has begun, and of two that began together the one noted last', () => {
    const versions = [
      { validFrom: 10, name: 'first' },
      { validFrom: 20, name: 'second' },
      { validFrom: 20, name: 'corrected' },
      { validFrom: 30, name: 'to come' },
    ]
    expect(inForce(versions, 25)?.name).toBe('corrected')
    expect(inForce(versions, 10)?.name).toBe('first')
    expect(inForce(versions, 9)).toBeNull()
  })
})
