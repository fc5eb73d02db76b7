/** Files that were taken in, as they are shown. */
import { z } from 'zod'
import { uploadFault } from '../../../shared/schemas/stationSetUpUploads.ts'
import type { ImportView, UploadReport } from '../../../shared/schemas/stationSetUpUploads.ts'
import { Import, Person, Station } from '../../models/index.ts'
import { notFound } from '../problems.ts'

const kinds = z.enum(['readings', 'auxiliary', 'demonstration']).catch('readings')

/** Newest first; the demonstration's own are among them. */
export async function listImports(stationId: number): Promise<ImportView[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  return present(await Import.findAll({ where: { stationId }, order: [['id', 'DESC']], limit: 200 }))
}

export async function readImport(importId: number): Promise<ImportView> {
  const row = await Import.findByPk(importId)
  const [view] = row ? await present([row]) : []
  if (!view) throw notFound('import', importId)
  return view
}

async function present(rows: readonly Import[]): Promise<ImportView[]> {
  const people = await Person.findAll({ where: { id: rows.flatMap(({ personId }) => personId ?? []) } })
  return rows.map((row) => ({
    id: row.id,
    stationId: row.stationId,
    kind: kinds.parse(row.kind),
    fileName: row.fileName,
    status: row.status,
    report: reportOf(row),
    person: people.find(({ id }) => id === row.personId)?.name ?? null,
    createdAt: row.createdAt.toISOString(),
    undoneAt: row.undoneAt?.toISOString() ?? null,
  }))
}

function reportOf({ counts, faults }: Import): UploadReport {
  const { rows = 0, minutes = 0, stored = 0, repeated = 0, conflicting = 0, from, to } = counts ?? {}
  const iso = (timeMs?: number): string | null => (timeMs === undefined ? null : new Date(timeMs).toISOString())
  const known = z
    .array(uploadFault)
    .catch([])
    .parse(faults ?? [])
  return { rows, minutes, stored, repeated, conflicting, startsAt: iso(from), endsAt: iso(to), faults: known }
}
