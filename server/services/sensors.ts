/** The register of a station's instruments: serials, dates that are due, offsets of their clocks. */
import type { ClockOffsetOrder, SensorChange, SensorRecord } from '../../shared/schemas/stationSetUpSensors.ts'
import type { Parts } from '../config/parts.ts'
import { ClockOffset, Deployment, DeploymentSensor, Person, Sensor, Station } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { changedMeanwhile, invalidInput, notFound } from './problems.ts'
import { inTransaction } from './transaction.ts'

export async function listSensors({ clock }: Pick<Parts, 'clock'>, stationId: number): Promise<SensorRecord[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const sensors = await Sensor.findAll({ where: { stationId }, order: [['id', 'ASC']] })
  const now = clock.now()
  const [places, offsets] = await Promise.all([
    placesOf(stationId, now),
    ClockOffset.findAll({ where: { sensorId: sensors.map(({ id }) => id) }, order: [['validFrom', 'DESC'], ['id', 'DESC']] }), // prettier-ignore
  ])
  const people = await Person.findAll({ where: { id: offsets.flatMap(({ confirmedById }) => confirmedById ?? []) } })
  return sensors.map((sensor) => {
    const own = offsets.filter(({ sensorId }) => sensorId === sensor.id)
    const inForce = own.find(({ validFrom }) => validFrom <= now)
    return {
      id: sensor.id,
      version: sensor.version,
      serial: sensor.serial,
      kind: sensor.kind,
      calibrationDue: sensor.dueDates?.calibrationDue ?? null,
      cleaningDue: sensor.dueDates?.cleaningDue ?? null,
      letter: places.letters.get(sensor.id) ?? null,
      firstDeployedAt: places.firstAt.get(sensor.id)?.toISOString() ?? null,
      clockOffsets: own.map((offset) => ({
        id: offset.id,
        validFrom: offset.validFrom.toISOString(),
        isInForce: offset === inForce,
        offsetSeconds: offset.offsetSeconds,
        sd: offset.sd,
        confirmedBy: people.find(({ id }) => id === offset.confirmedById)?.name ?? null,
        reason: offset.reason,
      })),
    }
  })
}

/** Letters in the deployment in force, and when each sensor was first deployed. */
async function placesOf(stationId: number, now: Date) {
  const deployments = await Deployment.findAll({ where: { stationId, replacesId: null }, order: [['validFrom', 'ASC'], ['id', 'ASC']] }) // prettier-ignore
  const places = await DeploymentSensor.findAll({ where: { deploymentId: deployments.map(({ id }) => id) } })
  const current = deployments.findLast(({ validFrom }) => validFrom <= now)
  const firstAt = new Map<number, Date>()
  for (const { id, validFrom } of deployments) {
    for (const { sensorId } of places.filter(({ deploymentId }) => deploymentId === id)) {
      if (!firstAt.has(sensorId)) firstAt.set(sensorId, validFrom)
    }
  }
  const letters = new Map(places.filter(({ deploymentId }) => deploymentId === current?.id).map(({ sensorId, letter }) => [sensorId, letter])) // prettier-ignore
  return { letters, firstAt }
}

export interface SensorEdit {
  stationId: number
  sensorId: number
  personId: number
}

export async function changeSensor(
  parts: Parts,
  { stationId, sensorId, personId }: SensorEdit,
  version: number,
  change: SensorChange,
): Promise<SensorRecord> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const sensor = await Sensor.findOne({ where: { id: sensorId, stationId }, lock: true, transaction })
    if (!sensor) throw notFound('sensor', sensorId)
    if (sensor.version !== version) throw changedMeanwhile('sensor', sensor.version, await sensorRecord(parts, stationId, sensorId)) // prettier-ignore
    const taken = await Sensor.findOne({ where: { stationId, serial: change.serial }, transaction })
    if (taken && taken.id !== sensorId) throw invalidInput([{ path: 'serial', message: 'is that of another sensor of this station' }]) // prettier-ignore
    const before = { serial: sensor.serial, ...sensor.dueDates }
    const dueDates = Object.fromEntries(
      Object.entries({ calibrationDue: change.calibrationDue, cleaningDue: change.cleaningDue }).flatMap(([name, date]) => (date === null ? [] : [[name, date]])), // prettier-ignore
    )
    await sensor.update({ serial: change.serial, dueDates, version: version + 1, updatedAt: parts.clock.now() }, { transaction }) // prettier-ignore
    const audited = { personId, action: 'sensor.change', entity: 'sensor', entityId: sensorId, before, after: change }
    await recordAudit(parts, audited, transaction)
  })
  return sensorRecord(parts, stationId, sensorId)
}

/** A further entry of the register: the entries before it stay as they were, and so do estimates made with them. */
export async function addClockOffset(
  parts: Parts,
  { stationId, sensorId, personId }: SensorEdit,
  order: ClockOffsetOrder,
): Promise<SensorRecord> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const sensor = await Sensor.findOne({ where: { id: sensorId, stationId }, transaction })
    if (!sensor) throw notFound('sensor', sensorId)
    const row = await ClockOffset.create(
      { sensorId, validFrom: new Date(order.validFrom), offsetSeconds: order.offsetSeconds, sd: order.sd, confirmedById: personId, reason: order.reason, recordedAt: parts.clock.now() }, // prettier-ignore
      { transaction },
    )
    const audited = { personId, action: 'clockOffset.add', entity: 'sensor', entityId: sensorId, after: { ...order, id: row.id } } // prettier-ignore
    await recordAudit(parts, audited, transaction)
  })
  parts.bus.publish('station.changed', { stationId })
  return sensorRecord(parts, stationId, sensorId)
}

async function sensorRecord(parts: Parts, stationId: number, sensorId: number): Promise<SensorRecord> {
  const record = (await listSensors(parts, stationId)).find(({ id }) => id === sensorId)
  if (!record) throw notFound('sensor', sensorId)
  return record
}
