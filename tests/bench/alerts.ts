/**
 * Limits, measured: a thousand of them over two hundred stations judged for one minute, in a calm and while all raise,
 * and a year's back-test beside reading the packed days alone and beside a plain count over the rows.
 */
import { usualPlaceCautions } from '../../shared/places/usualWords.ts'
import { addLimit, askBackTest } from '../../server/services/limits.ts'
import type { NewLimit } from '../../server/services/limits.ts'
import { atDesk, judgeStation, noConsent } from '../../server/services/alerts.ts'
import type { Office } from '../../server/services/alerts.ts'
import { packedStretches } from '../../server/services/limits/backTest.ts'
import { systemClock } from '../../server/config/clock.ts'
import type { Parts } from '../../server/config/parts.ts'
import { SeriesDay } from '../../server/models/index.ts'
import { packDay } from '../../server/models/seriesDayPayload.ts'
import { execute, select } from '../../server/models/sql.ts'
import { backTest, figuresNeeded } from '../../shared/alerts/backTest.ts'
import type { Condition } from '../../shared/schemas/limit.ts'
import { makeStation } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import { seeded } from '../support/seeded.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { Figure } from './benchParts.ts'

const stationCount = 200
const limitsEach = 5
const dayMs = 86_400_000
const minuteMs = 60_000
const days = 365

const office: Office = {
  portName: 'Bench',
  timeZone: 'Etc/UTC',
  caution: 'Figures support and never replace judgement.',
  isDemonstration: false,
  asksSecondPerson: false,
  placeCautions: usualPlaceCautions,
  longestShelfSeconds: 28_800,
}

const conditionOf = (raise: number): Condition => ({
  comparisons: [
    { kind: 'above', quantity: 'significantWaveHeight', raise, clear: raise * 0.85, riseOverSeconds: null },
    { kind: 'sector', quantity: 'leadingFrom', from: 180, to: 320, deadBand: 10 },
  ],
  when: null,
  onDelaySeconds: 0,
  offDelaySeconds: 1800,
  clearSigmas: 1,
  worstQuality: 3,
  latches: false,
})

const draftOf = (stationId: number, raise: number): NewLimit => ({
  subjectKind: 'station',
  subjectId: stationId,
  content: {
    ...{ title: null, condition: conditionOf(raise), priority: 'low', schedule: null, note: '', toCheck: '' },
    ...{ recipients: { steps: [], remindEverySeconds: null }, reviewOn: null, isPublished: false },
  },
  reason: 'bench',
  consent: noConsent,
})

const columns = `stationId, windowEndsAt, runId, revision, windowStartsAt, computedAt, origin, deploymentId, settingsId,
  softwareVersion, resultDigest, completeness, resolved, qualityFlag, waterDepth, sensorsUsed, sensorsDeployed,
  significantWaveHeight, significantWaveHeightSd, height, period, towardDegrees, towardDegreesSd`

interface Row {
  stationId: number
  at: number
  height: number
}

async function addEstimates({ sequelize }: Parts, rows: Row[]): Promise<void> {
  for (let n = 0; n < rows.length; n += 1000) {
    const values = rows
      .slice(n, n + 1000)
      .map(({ stationId, at, height }) => [
        ...[
          stationId,
          new Date(at),
          0,
          1,
          new Date(at - 1_200_000),
          new Date(at),
          'live',
          1,
          1,
          'bench',
          'bench',
          1,
          true,
          1,
        ],
        ...[12, 5, 5, height, height * 0.05, height * 0.9, 10, 60, 3],
      ])
    await execute(sequelize, `INSERT INTO estimates (${columns}) VALUES :rows`, { rows: values })
  }
}

async function passed(work: () => Promise<unknown>): Promise<number> {
  const start = performance.now()
  await work()
  return performance.now() - start
}

const median = (values: number[]): number => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN

async function judging(parts: Parts): Promise<Figure[]> {
  const ids: number[] = []
  for (let n = 0; n < stationCount; n += 1) ids.push((await makeStation(systemClock)).station.id)
  await atDesk(parts, office, async (desk) => {
    for (const id of ids) {
      for (let n = 0; n < limitsEach; n += 1) await addLimit(desk, draftOf(id, 2 + n * 0.1), null)
    }
  })
  const now = Math.floor(systemClock.now().getTime() / minuteMs) * minuteMs
  const minuteOf = async (at: number, height: number): Promise<number> => {
    await addEstimates(
      parts,
      ids.map((stationId) => ({ stationId, at, height })),
    )
    return passed(async () => {
      for (const id of ids) await judgeStation(parts, office, id)
    })
  }
  const figures: Figure[] = []
  const what = `${stationCount * limitsEach} limits over ${stationCount} stations`
  await minuteOf(now - 4 * minuteMs, 1)
  figures.push({ what: `${what}, a calm minute`, value: await minuteOf(now - 3 * minuteMs, 1), unit: 'ms passed' })
  figures.push({ what: `${what}, all raise`, value: await minuteOf(now - 2 * minuteMs, 4), unit: 'ms passed' })
  figures.push({ what: `${what}, all active`, value: await minuteOf(now - minuteMs, 4), unit: 'ms passed' })
  return figures
}

/** Height of a year with weather in it, a value a minute. */
function yearOf(): { heights: Float32Array; toward: Float32Array } {
  const random = seeded(7)
  const length = (days * dayMs) / minuteMs
  const heights = new Float32Array(length)
  const toward = new Float32Array(length)
  for (let n = 0; n < length; n += 1) {
    const weather = Math.sin(n / 9000) + 0.6 * Math.sin(n / 2100 + 1)
    heights[n] = Math.max(0.2, 1.3 + 0.7 * weather + 0.05 * (random() - 0.5))
    toward[n] = 60 + 30 * Math.sin(n / 5000)
  }
  return { heights, toward }
}

async function addYear(parts: Parts, stationId: number, firstDay: number): Promise<void> {
  const { heights, toward } = yearOf()
  const perDay = dayMs / minuteMs
  const flags = new Uint8Array(perDay).fill(1)
  for (let day = 0; day < days; day += 1) {
    const startsAt = firstDay + day * dayMs
    const of = (values: Float32Array) => values.slice(day * perDay, (day + 1) * perDay)
    const own = of(heights)
    const quantities = {
      significantWaveHeight: own,
      significantWaveHeightSd: own.map((height) => height * 0.05),
      towardDegrees: of(toward),
    }
    await SeriesDay.bulkCreate(
      Object.entries(quantities).map(([quantity, values]) => ({
        ...{ subjectKind: 'station', subjectId: stationId, quantity, stepSeconds: 60, goodCount: perDay },
        day: new Date(startsAt).toISOString().slice(0, 10),
        ...{ minimum: null, maximum: null, mean: null, payload: packDay({ values, flags }) },
      })),
    )
    await addEstimates(
      parts,
      Array.from(own, (height, n) => ({ stationId, at: startsAt + n * minuteMs, height })),
    )
  }
}

async function backTesting(parts: Parts): Promise<Figure[]> {
  const { station } = await makeStation(systemClock)
  const today = Math.floor(systemClock.now().getTime() / dayMs) * dayMs
  const from = today - days * dayMs
  await addYear(parts, station.id, from)
  const condition = conditionOf(2)
  const figures = figuresNeeded(condition)
  const read = () => packedStretches(parts, { subjectKind: 'station', subjectId: station.id }, figures, from, today)
  const reading: number[] = []
  const judged: number[] = []
  for (let n = 0; n < 7; n += 1) {
    reading.push(await passed(read))
    const stretches = await read()
    judged.push(await passed(async () => backTest(condition, stretches, from, 'Etc/UTC')))
  }
  const counting: number[] = []
  for (let n = 0; n < 3; n += 1) counting.push(await passed(() => plainCount(parts, station.id, from)))
  const question = { subjectKind: 'station', subjectId: station.id, condition, days: 365, shifts: [] } as const
  const whole = await passed(() => askBackTest(parts, 'Etc/UTC', { ...question, shifts: [-0.2, 0.2, 0.4] }))
  const readMs = median(reading)
  const oneMs = readMs + median(judged)
  return [
    { what: `reading ${days} packed days of ${figures.length} series`, value: readMs, unit: 'ms passed' },
    { what: 'back-test of the year, reading and judging', value: oneMs, unit: 'ms passed' },
    { what: 'back-test of the year', value: oneMs / readMs, unit: 'times the reading' },
    { what: 'plain count over the rows of the year', value: median(counting), unit: 'ms passed' },
    { what: 'back-test of the year', value: oneMs / median(counting), unit: 'times the plain count' },
    { what: 'back-test with three other values, as asked', value: whole, unit: 'ms passed' },
  ]
}

/** Counts windows above a height: it knows no delays, no dead-band, no gaps. */
const plainCount = ({ sequelize }: Parts, stationId: number, from: number) =>
  select(
    sequelize,
    `SELECT COUNT(*) AS count FROM estimates WHERE stationId = :stationId AND runId = 0 AND windowEndsAt > :from
       AND significantWaveHeight > 2 AND towardDegrees BETWEEN 0 AND 140`,
    { stationId, from: new Date(from) },
  )

export async function benchAlerts(): Promise<Figure[]> {
  const server = await startMariadb({ durable: true })
  const parts = await benchParts(await createBenchSchema(server))
  try {
    return [...(await judging(parts)), ...(await backTesting(parts))]
  } finally {
    await parts.sequelize.close()
    await server.stop()
  }
}
