/** The alerts whose limit says that they are published, as CAP messages: of the last days, newest first. */
import { Op } from 'sequelize'
import { z } from 'zod'
import { capMessages } from '../../../shared/alerts/cap.ts'
import type { CapMessage } from '../../../shared/alerts/cap.ts'
import { valueWithSd } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { AlertView } from '../../../shared/schemas/alert.ts'
import { alertEventKind } from '../../../shared/schemas/alert.ts'
import type { SubjectView } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, AlertEvent, LimitVersion, Place, Station } from '../../models/index.ts'
import { fromJson } from '../limits/rows.ts'
import type { Office } from './office.ts'
import { presentAlerts } from './present.ts'

const keptMs = 7 * 86_400_000

const area = z.object({ coordinates: z.array(z.array(z.tuple([z.number(), z.number()]))).min(1) })

const plainRing = z.array(z.tuple([z.number(), z.number()]))

/** A GeoJSON polygon's outer ring, or the ring itself, closed. */
function ringOf(polygon: unknown): [number, number][] | null {
  const stored = fromJson(polygon)
  const parsed = area.safeParse(stored)
  const ring = parsed.success ? parsed.data.coordinates[0] : plainRing.safeParse(stored).data
  const [first, last] = [ring?.[0], ring?.at(-1)]
  if (!ring || !first || !last) return null
  return first[0] === last[0] && first[1] === last[1] ? ring : [...ring, first]
}

type Placed = Pick<Station | Place, 'latitude' | 'longitude' | 'areaPolygon'>

/** Where the subjects of alerts are, by kind and number. */
async function wheresOf(subjects: SubjectView[]): Promise<(subject: SubjectView) => Placed | undefined> {
  const idsOf = (wanted: SubjectView['kind']) => subjects.flatMap(({ kind, id }) => (kind === wanted && id ? [id] : []))
  const [stations, places] = await Promise.all([
    Station.findAll({ where: { id: idsOf('station') } }),
    Place.findAll({ where: { id: idsOf('place') } }),
  ])
  return ({ kind, id }) => (kind === 'station' ? stations : kind === 'place' ? places : []).find((one) => one.id === id)
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
  const whereIs = await wheresOf(views.map(({ subject }) => subject))
  const events = await AlertEvent.findAll({ where: { alertId: views.map(({ id }) => id) }, order: [['id', 'ASC']] })
  const messages = views.flatMap((view) => {
    const where = whereIs(view.subject)
    const version = versions.find(({ id }) => published.some((row) => row.id === view.id && row.limitVersionId === id))
    if (!where || !version) return []
    const own = events.filter(({ alertId }) => alertId === view.id)
    return messagesOf(parts, office, sender, { view, where, toCheck: version.toCheck, own })
  })
  return messages.sort((a, b) => (a.sent < b.sent ? 1 : a.sent > b.sent ? -1 : 0))
}

interface Published {
  view: AlertView
  where: Placed
  toCheck: string
  own: AlertEvent[]
}

function messagesOf({ environment }: Parts, office: Office, sender: string, { view, where, toCheck, own }: Published) {
  const quantity = quantityOf(view.quantity)
  return capMessages({
    ...{ alertId: view.id, isExercise: view.isExercise, isDemonstration: office.isDemonstration },
    ...{ priority: view.priority, portName: office.portName, title: view.title, words: view.words, toCheck, sender },
    ...{ caution: office.caution, subjectName: view.subject.name, subjectCode: view.subject.code },
    ...{ latitude: where.latitude, longitude: where.longitude, ring: ringOf(where.areaPolygon ?? null) },
    web: `${environment.publicUrl}/alerts/${view.id}`,
    crossedAt: Date.parse(view.crossedAt),
    events: own.map(({ id, kind, at, value }) => ({
      ...{ id, kind: alertEventKind.parse(kind), at: at.getTime(), number: value },
      value: valueWithSd(quantity, value, null),
    })),
  })
}
