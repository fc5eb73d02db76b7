/** What a limit may be set on, each with the quantities that are told of it. */
import type { Transaction } from 'sequelize'
import { quantities } from '../../../shared/alerts/quantities.ts'
import type { LimitSubject, QuantityKey, SubjectKind } from '../../../shared/schemas/limit.ts'
import { quantitiesOfKind } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceKind } from '../../../shared/schemas/placeQuantity.ts'
import { placeSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import { Place, PlaceSettings, Station } from '../../models/index.ts'
import { fromJson } from './rows.ts'

/** Of a place by its kind: an entrance has no run-up. */
export function quantitiesOf(subjectKind: SubjectKind, placeKind: PlaceKind | null = null): QuantityKey[] {
  const told = placeKind === null ? null : quantitiesOfKind[placeKind]
  const fits = quantities.filter(
    ({ subjects, ofPlace }) => subjects.includes(subjectKind) && (!told || (ofPlace && told.includes(ofPlace))),
  )
  const order = ({ ofPlace }: (typeof fits)[number]): number => (told && ofPlace ? told.indexOf(ofPlace) : 0)
  return fits.sort((a, b) => order(a) - order(b)).map(({ key }) => key)
}

/** The stations whose figures a limit of this subject needs: of a place those of its newest settings, in their order. */
export async function stationsBehind(
  { subjectKind, subjectId }: { subjectKind: SubjectKind; subjectId: number | null },
  transaction: Transaction,
): Promise<number[]> {
  if (subjectId === null || subjectKind === 'system') return []
  if (subjectKind === 'station') return [subjectId]
  const order = [
    ['validFrom', 'DESC'],
    ['id', 'DESC'],
  ] as [string, string][]
  const newest = await PlaceSettings.findOne({ where: { placeId: subjectId }, order, transaction })
  const content = newest && placeSettingsContent.safeParse(fromJson(newest.content)).data
  return content?.stationOrder.map(({ stationId }) => stationId) ?? []
}

/** Stations and places in service in their order, and the program itself. */
export async function listSubjects(): Promise<LimitSubject[]> {
  const [stations, places] = await Promise.all([
    Station.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']] }),
    Place.findAll({
      where: { retiredAt: null },
      order: [
        ['position', 'ASC'],
        ['id', 'ASC'],
      ],
    }),
  ])
  return [
    ...stations.map(({ id, name, code }) => ({ kind: 'station' as const, id, name, code, quantities: quantitiesOf('station') })), // prettier-ignore
    ...places.map(({ id, name, code, kind }) => ({ kind: 'place' as const, id, name, code, quantities: quantitiesOf('place', kind) })), // prettier-ignore
    { kind: 'system', id: null, name: 'Offing itself', code: 'SYSTEM', quantities: quantitiesOf('system') },
  ]
}
