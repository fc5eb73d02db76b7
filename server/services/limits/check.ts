/** What shapes alone cannot tell of a limit: does the quantity fit the subject, are values in range, are the lists there. */
import type { Transaction } from 'sequelize'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { LimitClass, LimitContent, SubjectKind } from '../../../shared/schemas/limit.ts'
import type { PlaceKind } from '../../../shared/schemas/placeQuantity.ts'
import { DistributionList, Place, Station } from '../../models/index.ts'
import { invalidInput } from '../problems.ts'
import { quantitiesOf } from './subjects.ts'

/** As a fault names them. */
const words: Record<PlaceKind, string> = {
  entrance: 'an entrance',
  breakwater: 'a breakwater',
  berth: 'a berth',
  beach: 'a beach',
}

type Faults = { path: string; message: string }[]
/** Answers the class that all its quantities have; throws the 422 with every fault. */
export async function classOf(
  draft: { subjectKind: SubjectKind; subjectId: number | null; content: LimitContent },
  transaction: Transaction,
): Promise<LimitClass> {
  const { subjectKind, subjectId, content } = draft
  const faults: Faults = []
  const refuse = (path: string, message: string) => faults.push({ path, message })
  const limitClass = quantityOf(content.condition.comparisons[0].quantity).limitClass
  const isPlace = subjectKind === 'place' && subjectId !== null
  const place = isPlace ? await Place.findByPk(subjectId, { transaction }) : null
  const told = quantitiesOf(subjectKind, place?.kind)
  const named = place ? words[place.kind] : subjectKind === 'system' ? 'the system' : `a ${subjectKind}`
  for (const [index, comparison] of content.condition.comparisons.entries()) {
    const quantity = quantityOf(comparison.quantity)
    const path = `content.condition.comparisons.${index}`
    if (!told.includes(comparison.quantity)) refuse(`${path}.quantity`, `is not told of ${named}`)
    if (quantity.limitClass !== limitClass) refuse(`${path}.quantity`, 'must not mix waves and data health')
    if (quantity.isCircular !== (comparison.kind === 'sector')) refuse(`${path}.kind`, 'does not fit the quantity')
    if (comparison.kind === 'above' && comparison.riseOverSeconds !== null && !quantity.hasRise) {
      refuse(`${path}.riseOverSeconds`, 'has no rise')
    }
    if (comparison.kind === 'sector') continue
    for (const end of ['raise', 'clear'] as const) {
      if (comparison[end] < quantity.least || comparison[end] > quantity.most)
        refuse(`${path}.${end}`, 'is out of range')
    }
  }
  if ((subjectKind === 'system') !== (subjectId === null)) refuse('subjectId', 'does not fit the subject')
  if (subjectKind === 'station' && subjectId !== null) {
    const station = await Station.findByPk(subjectId, { transaction })
    if (!station || station.retiredAt !== null) refuse('subjectId', 'is no station in service')
  }
  if (isPlace && (!place || place.retiredAt)) refuse('subjectId', 'is no place in service')
  const wanted = [...new Set(content.recipients.steps.flatMap(({ listIds }) => listIds))]
  const known =
    wanted.length === 0 ? 0 : await DistributionList.count({ where: { id: wanted, retiredAt: null }, transaction })
  if (known < wanted.length) refuse('content.recipients.steps', 'names a list that is not there')
  if (faults.length > 0) throw invalidInput(faults)
  return limitClass
}
