/**
 * From one watch to the next in one transaction: the sheet is frozen, the old watch ends, the new one begins, the log tells it. Usually both
 * sign and every open item has its note; in need the relief takes over at once and the notes are owed.
 */
import type { Transaction } from 'sequelize'
import type { HandOverSheet } from '../../../shared/schemas/watch.ts'
import { withoutNote } from '../../../shared/watchLog/handOverSheet.ts'
import { HandOver, Person, Watch } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'
import { beginWatch, nameOf, notOnWatch, openWatch, titleOf } from './begin.ts'
import type { WatchParts } from './begin.ts'

/** Notes of items that are no longer open stay: they may come back within the watch. */
export async function keepNotes(
  { sequelize, bus }: WatchParts,
  order: { personId: number; notes: Record<string, string>; expected: string },
): Promise<void> {
  await inTransaction(sequelize, async (transaction) => {
    const watch = await openWatch(transaction)
    if (watch?.personId !== order.personId) throw notOnWatch()
    await watch.update({ notes: { ...watch.notes, ...order.notes }, expected: order.expected }, { transaction })
  })
  bus.publish('watch.changed', {})
}

interface Passing {
  watch: Watch
  toPersonId: number
  name: string
  sheet: HandOverSheet
  isSigned: boolean
  reason: string | null
}

async function pass(parts: WatchParts, passing: Passing, transaction: Transaction): Promise<HandOver> {
  const { watch, toPersonId, name, sheet, isSigned, reason } = passing
  const now = parts.clock.now()
  await watch.update({ endedAt: now }, { transaction })
  const next = await beginWatch(parts, { personId: toPersonId, name }, transaction)
  const row = {
    fromWatchId: watch.id,
    toWatchId: next.id,
    sheet,
    signedFromAt: isSigned ? now : null,
    signedToAt: now,
    reason,
  }
  const handOver = await HandOver.create(row, { transaction })
  const audit = { action: isSigned ? 'watch.handOver' : 'watch.takeOver', entity: 'handOver', entityId: handOver.id }
  const after = { from: watch.personId, to: toPersonId, reason, carried: sheet.carried.length }
  await recordAudit(parts, { ...audit, personId: isSigned ? watch.personId : toPersonId, after }, transaction)
  return handOver
}

const counted = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`

/** Who hands over asks by their session, `reliefId` has proven who they are. */
export async function signHandOver(
  parts: WatchParts,
  order: { personId: number; reliefId: number; name: string; sound: string; sheet: HandOverSheet },
): Promise<void> {
  const { personId, reliefId, name, sound, sheet } = order
  await inTransaction(parts.sequelize, async (transaction) => {
    const watch = await openWatch(transaction)
    if (watch?.personId !== personId || sheet.watchId !== watch.id) throw notOnWatch()
    const missing = withoutNote(sheet)
    if (missing.length > 0) {
      throw invalidInput(missing.map(({ key, title }) => ({ path: `notes.${key}`, message: `${title} needs a note` })))
    }
    const handOver = await pass(
      parts,
      { watch, toPersonId: reliefId, name, sheet, isSigned: true, reason: null },
      transaction,
    )
    const [from, to] = [await nameOf(personId, transaction), await nameOf(reliefId, transaction)]
    const items = sheet.carried.length === 0 ? 'Nothing carried over' : counted(sheet.carried.length, 'item read and understood', 'items read and understood') // prettier-ignore
    const text = `${titleOf(name, to)}: watch taken over from ${titleOf(watch.name, from)}. ${items}. Sound ${sound}. Both signed.`
    const links = { handOverId: handOver.id }
    await writeSystemLine(parts, { kind: 'watch', text, personId: reliefId, figures: sheet.sea, links }, transaction)
  })
  parts.bus.publish('watch.changed', {})
}

/** By the relief, from their own session, when it cannot wait. */
export async function takeOverAtOnce(
  parts: WatchParts,
  order: { personId: number; name: string; reason: string; sheet: HandOverSheet },
): Promise<void> {
  const { personId, name, reason, sheet } = order
  await inTransaction(parts.sequelize, async (transaction) => {
    const watch = await openWatch(transaction)
    if (!watch) {
      const detail = 'Nobody is on watch: begin a watch instead.'
      throw new Refused({ status: 409, code: 'watch.nobody', title: 'Nobody is on watch', detail })
    }
    if (watch.personId === personId) {
      throw new Refused({
        status: 409,
        code: 'watch.yours',
        title: 'Your own watch',
        detail: 'You are on watch already.',
      })
    }
    const owed = withoutNote(sheet)
    const passing = { watch, toPersonId: personId, name, sheet, isSigned: owed.length === 0, reason }
    const handOver = await pass(parts, passing, transaction)
    const [from, to] = [await nameOf(watch.personId, transaction), await nameOf(personId, transaction)]
    const notes =
      owed.length === 0 ? 'No note is owed' : `${counted(owed.length, 'note is', 'notes are')} owed by ${from}`
    const text = `${titleOf(name, to)}: taken over at once from ${titleOf(watch.name, from)}. ${reason}. ${notes}.`
    const links = { handOverId: handOver.id }
    await writeSystemLine(parts, { kind: 'watch', text, personId, figures: sheet.sea, links }, transaction)
  })
  parts.bus.publish('watch.changed', {})
}

/** Written by who owes them; with the last one the hand-over is signed. */
export async function writeOwed(
  parts: WatchParts,
  { handOverId, personId, notes }: { handOverId: number; personId: number; notes: Record<string, string> },
): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const handOver = await HandOver.findByPk(handOverId, { lock: true, transaction })
    if (!handOver) throw notFound('hand-over', handOverId)
    const from = await Watch.findByPk(handOver.fromWatchId, { transaction, rejectOnEmpty: true })
    if (from.personId !== personId) {
      const who = await Person.findByPk(from.personId, { attributes: ['name'], transaction })
      const detail = `These notes are owed by ${who?.name ?? 'somebody else'}.`
      throw new Refused({ status: 403, code: 'handOver.notYours', title: 'Not your notes', detail })
    }
    if (handOver.signedFromAt !== null) return
    const before = withoutNote(handOver.sheet).length
    const carried = handOver.sheet.carried.map((item) =>
      item.note.trim() === '' ? { ...item, note: (notes[item.key] ?? '').trim() } : item,
    )
    const sheet = { ...handOver.sheet, carried }
    const left = withoutNote(sheet).length
    await handOver.update({ sheet, signedFromAt: left === 0 ? parts.clock.now() : null }, { transaction })
    const rest = left === 0 ? 'None is owed any more; signed' : `${counted(left, 'is', 'are')} still owed`
    const text = `Hand-over ${handOver.id}: ${counted(before - left, 'owed note', 'owed notes')} written. ${rest}.`
    await writeSystemLine(parts, { kind: 'watch', text, personId, links: { handOverId } }, transaction)
    const audit = { action: 'watch.owedNotes', entity: 'handOver', entityId: handOverId, personId, after: { notes } }
    await recordAudit(parts, audit, transaction)
  })
  parts.bus.publish('watch.changed', {})
}
