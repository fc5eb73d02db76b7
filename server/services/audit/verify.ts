/** Walks the whole chain and holds it against the anchors; what it finds is kept, so that the page shows when it was last looked. */
import type { AuditVerification } from '../../../shared/schemas/audit.ts'
import { auditVerification } from '../../../shared/schemas/audit.ts'
import type { Parts } from '../../config/parts.ts'
import { Audit, AuditCheck, Person } from '../../models/index.ts'
import { writeSystemLine } from '../watchLog.ts'
import { readAnchors } from './anchors.ts'
import type { Anchor } from './anchors.ts'
import { walkChain } from './chain.ts'

type Faults = AuditVerification['faults']
const mostFaults = 50
/** The sealing job runs every ten seconds. */
const sealedWithinMilliseconds = 10 * 60_000

type Verified = Pick<Parts, 'clock' | 'environment' | 'sequelize'>

/** `by`: who asked; null: the program itself. */
export async function verifyAudit(parts: Verified, by: number | null): Promise<AuditVerification> {
  const anchors = await readAnchors(parts)
  const { faults, sealed, newest } = await walk(anchors)
  faults.push(...faultsOfAnchors(anchors, newest.number, sealed))
  const waiting = await waitingRows(parts)
  if (waiting.tooLong > 0) {
    faults.push({
      kind: 'unsealed',
      sealNumber: null,
      says: `${waiting.tooLong} rows have waited for a seal for more than ten minutes: the sealing job does not run.`,
    })
  }
  const anchor = anchors.filter(({ isOurs }) => isOurs).at(-1)
  const person = by === null ? null : await Person.findByPk(by, { attributes: ['id', 'name'] })
  const found: AuditVerification = {
    at: parts.clock.now().toISOString(),
    person: person && { id: person.id, name: person.name },
    isWhole: faults.length === 0,
    sealedRows: sealed,
    waitingRows: waiting.all,
    newestSeal: newest.number,
    newestHash: newest.hash,
    anchors: anchors.length,
    newestAnchor: anchor ? { at: anchor.at, sealNumber: anchor.sealNumber } : null,
    faults: faults.slice(0, mostFaults),
  }
  await AuditCheck.create({ at: parts.clock.now(), personId: by, isWhole: found.isWhole, result: found })
  if (!found.isWhole) {
    const text = `The audit does not hold: ${found.faults[0]?.says ?? ''} An administrator looks at Audit.`
    await writeSystemLine(parts, { kind: 'system', text })
  }
  return found
}

async function walk(
  anchors: Anchor[],
): Promise<{ faults: Faults; sealed: number; newest: { number: number; hash: string } }> {
  const faults: Faults = []
  const expected = new Map(anchors.filter(({ isOurs }) => isOurs).map(({ sealNumber, hash }) => [sealNumber, hash]))
  let sealed = 0
  let newest = { number: 0, hash: '' }
  for await (const { number, hash, fits } of walkChain()) {
    sealed += 1
    if (number > newest.number + 1 && faults.length < mostFaults) {
      const span =
        number === newest.number + 2 ? `row ${number - 1} is` : `rows ${newest.number + 1} to ${number - 1} are`
      faults.push({ kind: 'missing', sealNumber: newest.number + 1, says: `Sealed ${span} gone.` })
    }
    if (!fits && faults.length < mostFaults) {
      const says = `Sealed row ${number} is not what was sealed: it, or the row before it, was altered.`
      faults.push({ kind: 'altered', sealNumber: number, says })
    }
    const text = hash.toString('hex')
    const anchored = expected.get(number)
    if (anchored !== undefined && anchored !== text && faults.length < mostFaults) {
      const says = `Row ${number} bears another seal than the anchor kept of it: the chain was made anew.`
      faults.push({ kind: 'anchorDiffers', sealNumber: number, says })
    }
    newest = { number, hash: text }
  }
  return { faults, sealed, newest }
}

function faultsOfAnchors(anchors: Anchor[], newest: number, sealed: number): Faults {
  const faults: Faults = []
  const forged = anchors.findIndex(({ isOurs }) => !isOurs)
  if (forged >= 0) {
    const says = `Line ${forged + 1} of the anchors' file was not written by this installation, or a line before it is gone.`
    faults.push({ kind: 'anchorForged', sealNumber: null, says })
  }
  const ours = anchors.filter(({ isOurs }) => isOurs)
  const furthest = Math.max(0, ...ours.map(({ sealNumber }) => sealNumber))
  if (furthest > newest) {
    const says = `Rows ${newest + 1} to ${furthest} are gone from the end: an anchor names row ${furthest}. A restored backup looks like this too.`
    faults.push({ kind: 'tailMissing', sealNumber: newest + 1, says })
  }
  if (anchors.length === 0 && sealed > 0) {
    const says = "The anchors' file is missing or empty though rows were sealed: rows cut off the end cannot be found."
    faults.push({ kind: 'anchorsGone', sealNumber: null, says })
  }
  return faults
}

async function waitingRows({ clock }: Verified): Promise<{ all: number; tooLong: number }> {
  const rows = await Audit.findAll({ where: { sealNumber: null }, attributes: ['at'] })
  const since = clock.now().getTime() - sealedWithinMilliseconds
  return { all: rows.length, tooLong: rows.filter(({ at }) => at.getTime() < since).length }
}

export async function readLatestVerification(): Promise<AuditVerification | null> {
  const row = await AuditCheck.findOne({
    order: [
      ['at', 'DESC'],
      ['id', 'DESC'],
    ],
  })
  return row ? auditVerification.parse(row.result) : null
}
