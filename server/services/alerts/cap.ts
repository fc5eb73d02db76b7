/** The alerts whose limit says that they are published, as CAP messages: of the last days, newest first. */
import { Op } from 'sequelize'
import { z } from 'zod'
import { capMessages } from '../../../shared/alerts/cap.ts'
import type { CapMessage } from '../../../shared/alerts/cap.ts'
import { valueWithSd } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { AlertView } from '../../../shared/schemas/alert.ts'
import { alertEventKind } from '../../../shared/schemas/alert.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, AlertEvent, LimitVersion, Station } from '../../models/index.ts'
import { fromJson } from '../limits/rows.ts'
import type { Office } from './office.ts'
import { presentAlerts } from './present.ts'

const keptMs = 7 * 86_400_000

const area = z.object({ coordinates: z.array(z.array(z.tuple([z.number(), z.number()]))).min(1) })

function ringOf(polygon: unknown): [number, number][] | null {
  const parsed = area.safeParse(fromJson(polygon))
  return parsed.success ? (parsed.data.coordinates[0] ?? null) : null
}

/** All messages of all published alerts, newest first. */
export async function readCapMessages(parts: Parts, office: Office, sender: string): Promise<CapMessage[]> {
  const since = new Date(parts.clock.now().getTime() - keptMs)
  const alerts = await Alert.findAll({
    where: { announcedAt: { [Op.ne]: null }, [Op.or]: [{ closedAt: null }, { closedAt: { [Op.gte]: since } }] },
    order: [['id', 'DESC']],
    limit: 500,
  })
  const versions = await LimitVersion.findAll({ where: { id: alerts.map(({ limitVersionId }) => limitVersionId) } })
  const published = alerts.filter(({ limitVersionId }) =>
    versions.some(({ id, isPublished }) => id === limitVersionId && isPublished),
  )
  const views = await presentAlerts(parts, published)
  const stations = await Station.findAll({ where: { id: views.flatMap(({ subject }) => subject.id ?? []) } })
  const events = await AlertEvent.findAll({ where: { alertId: views.map(({ id }) => id) }, order: [['id', 'ASC']] })
  const messages = views.flatMap((view) => {
    const station = stations.find(({ id }) => id === view.subject.id)
    const version = versions.find(({ id }) => published.some((row) => row.id === view.id && row.limitVersionId === id))
    if (!station || !version) return []
    const own = events.filter(({ alertId }) => alertId === view.id)
    return messagesOf(parts, office, sender, { view, station, toCheck: version.toCheck, own })
  })
  return messages.sort((a, b) => (a.sent < b.sent ? 1 : a.sent > b.sent ? -1 : 0))
}

interface Published {
  view: AlertView
  station: Station
  toCheck: string
  own: AlertEvent[]
}

function messagesOf(
  { environment }: Parts,
  office: Office,
  sender: string,
  { view, station, toCheck, own }: Published,
) {
  const quantity = quantityOf(view.quantity)
  return capMessages({
    ...{ alertId: view.id, isExercise: view.isExercise, isDemonstration: office.isDemonstration },
    ...{ priority: view.priority, portName: office.portName, title: view.title, words: view.words, toCheck, sender },
    ...{ caution: office.caution, subjectName: view.subject.name, subjectCode: view.subject.code },
    ...{ latitude: station.latitude, longitude: station.longitude, ring: ringOf(station.areaPolygon ?? null) },
    web: `${environment.publicUrl}/alerts/${view.id}`,
    crossedAt: Date.parse(view.crossedAt),
    events: own.map(({ id, kind, at, value }) => ({
      ...{ id, kind: alertEventKind.parse(kind), at: at.getTime(), number: value },
      value: valueWithSd(quantity, value, null),
    })),
  })
}
