/** Offsets of sensors' clocks that a person has confirmed, from what an estimate found. */
import type { ConfirmedOffset, OffsetConfirmation } from '../../../shared/schemas/clockOffset.ts'
import type { Parts } from '../../config/parts.ts'
import { ClockOffset, Station } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { recordAudit } from '../audit.ts'
import { notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { wholeEstimate } from './read.ts'

interface OffsetRow {
  sensorId: number
  letter: string
  offsetSeconds: number
  sd: number
  validFrom: Date
  recordedAt: Date
  confirmedBy: string | null
  reason: string
}

/** Of the sensors in the deployment in force, the newest entry each. */
const inForceNow = `
  SELECT c.sensorId, s.letter, c.offsetSeconds, c.sd, c.validFrom, c.recordedAt, p.name AS confirmedBy, c.reason
  FROM clockOffsets c
    JOIN deploymentSensors s ON s.sensorId = c.sensorId AND s.deploymentId = (
      SELECT d.id FROM deployments d WHERE d.stationId = :stationId AND d.replacesId IS NULL AND d.validFrom <= :now
      ORDER BY d.validFrom DESC, d.id DESC LIMIT 1)
    LEFT JOIN people p ON p.id = c.confirmedById
  WHERE c.validFrom <= :now AND NOT EXISTS (
    SELECT 1 FROM clockOffsets later WHERE later.sensorId = c.sensorId AND later.validFrom <= :now
      AND (later.validFrom > c.validFrom OR (later.validFrom = c.validFrom AND later.id > c.id)))
  ORDER BY s.position`

const rowsInForce = (parts: Parts, stationId: number): Promise<OffsetRow[]> =>
  select<OffsetRow>(parts.sequelize, inForceNow, { stationId, now: parts.clock.now() })

/** What was set back to nothing has no line. */
export async function listClockOffsets(parts: Parts, stationId: number): Promise<ConfirmedOffset[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  return (await rowsInForce(parts, stationId)).filter(({ offsetSeconds }) => offsetSeconds !== 0).map(presentOffset)
}

/** The offset found comes on top of the one that its estimate already had put right. Holds for windows that end from now on. */
export async function confirmClockOffset(
  parts: Parts,
  stationId: number,
  order: OffsetConfirmation,
  personId: number,
): Promise<ConfirmedOffset> {
  const { letter, windowEndsAt, revision, reason } = order
  const estimate = await wholeEstimate(parts, stationId, new Date(windowEndsAt), revision)
  if (!estimate) throw notFound('estimate', `${stationId}/${windowEndsAt}/${revision}`)
  const verdict = estimate.detail?.sensors.find(({ id }) => id === letter)
  if (verdict?.clockOffset == null || verdict.clockOffsetSd === null) throw nothingFound(letter)
  const { clockOffset: found, clockOffsetSd: foundSd } = verdict
  const sensorId = await sensorOf(parts, estimate.deploymentId, letter)
  await inTransaction(parts.sequelize, async (transaction) => {
    const before = (await rowsInForce(parts, stationId)).find((row) => row.sensorId === sensorId)
    if (before && before.recordedAt.getTime() > Date.parse(estimate.computedAt)) throw confirmedMeanwhile(before)
    const now = parts.clock.now()
    const row = await ClockOffset.create(
      {
        sensorId,
        validFrom: now,
        offsetSeconds: (before?.offsetSeconds ?? 0) + found,
        sd: Math.hypot(before?.offsetSeconds ? before.sd : 0, foundSd),
        confirmedById: personId,
        reason,
        recordedAt: now,
      },
      { transaction },
    )
    const after = { stationId, ...order, found, offsetSeconds: row.offsetSeconds, sd: row.sd }
    const change = { personId, action: 'clockOffset.confirm', entity: 'clockOffset', entityId: row.id }
    await recordAudit(parts, { ...change, before: before ? presentOffset(before) : null, after }, transaction)
  })
  const confirmed = (await rowsInForce(parts, stationId)).find((row) => row.sensorId === sensorId)
  if (!confirmed) throw notFound('clockOffset', `of ${letter}`)
  return presentOffset(confirmed)
}

async function sensorOf({ sequelize }: Parts, deploymentId: number, letter: string): Promise<number> {
  const [row] = await select<{ sensorId: number }>(
    sequelize,
    'SELECT sensorId FROM deploymentSensors WHERE deploymentId = :deploymentId AND letter = :letter',
    { deploymentId, letter },
  )
  if (!row) throw notFound('sensor', letter)
  return row.sensorId
}

function presentOffset({ sensorId: _, recordedAt: _r, validFrom, ...row }: OffsetRow): ConfirmedOffset {
  return { ...row, validFrom: validFrom.toISOString() }
}

const nothingFound = (letter: string): Refused =>
  new Refused({
    status: 409,
    code: 'clockOffset.notFound',
    title: 'Nothing to confirm',
    detail: `That estimate found no clock offset of ${letter}. Look at the newest estimate.`,
  })

/** What this estimate found has been put right since: confirming it again would apply it twice. */
const confirmedMeanwhile = (row: OffsetRow): Refused =>
  new Refused({
    status: 409,
    code: 'clockOffset.confirmedMeanwhile',
    title: 'Confirmed meanwhile',
    detail: `An offset of ${row.letter} was confirmed after that estimate was made. Wait for the next estimate.`,
    current: presentOffset(row),
  })
