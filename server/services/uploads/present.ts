import { join } from 'node:path'
import { guessLayout } from '../../../shared/uploads/guessLayout.ts'
import type { KnownColumn } from '../../../shared/uploads/guessLayout.ts'
import type { ColumnKind } from '../../../shared/uploads/units.ts'
import type { UploadView } from '../../../shared/schemas/stationSetUpUploads.ts'
import type { Parts } from '../../config/parts.ts'
import type { Upload } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { firstLines } from './fileLines.ts'
import { uploadsFolder } from './receive.ts'

const shownLines = 12
const guessedFrom = 40

const auxiliaryNames: Record<string, readonly string[]> = {
  waterLevel: ['water level', 'waterlevel', 'level', 'gauge'],
  tide: ['tide', 'predicted', 'prediction', 'tide level'],
  barometer: ['barometer', 'air pressure', 'pressure', 'qff'],
  windSpeed: ['wind speed', 'windspeed', 'wind'],
  windFrom: ['wind from', 'windfrom', 'wind direction', 'wind dir'],
}

export interface UploadColumn extends KnownColumn {
  kind: ColumnKind
}

/** What a file of this kind may hold: the sensors that ever stood in the station's array, or the quantities beside it. */
export async function columnsFor(
  { sequelize }: Pick<Parts, 'sequelize'>,
  { kind, stationId }: Pick<Upload, 'kind' | 'stationId'>,
): Promise<UploadColumn[]> {
  if (kind === 'auxiliary') {
    return Object.entries(auxiliaryNames).map(([letter, names]) => ({ letter, names, kind: letter as ColumnKind }))
  }
  const rows = await select<{ letter: string; serial: string; kind: 'pressure' | 'surface' }>(
    sequelize,
    `SELECT DISTINCT p.letter, s.serial, s.kind FROM deploymentSensors p
     JOIN deployments d ON d.id = p.deploymentId JOIN sensors s ON s.id = p.sensorId
     WHERE d.stationId = :stationId AND d.replacesId IS NULL ORDER BY p.letter`,
    { stationId },
  )
  const letters = [...new Set(rows.map(({ letter }) => letter))]
  return letters.flatMap((letter) => {
    const own = rows.filter((row) => row.letter === letter)
    return own[0] ? [{ letter, kind: own[0].kind, names: own.map(({ serial }) => serial.toLowerCase()) }] : []
  })
}

export async function presentUpload(parts: Parts, upload: Upload): Promise<UploadView> {
  const path = join(uploadsFolder(parts), upload.storedAs)
  const lines = await firstLines(path, guessedFrom).catch(() => [])
  const guess = guessLayout(lines, await columnsFor(parts, upload))
  return {
    id: upload.id,
    stationId: upload.stationId,
    kind: upload.kind,
    fileName: upload.fileName,
    bytes: Number(upload.bytes),
    state: upload.state,
    sample: lines.slice(0, shownLines).map((line) => line.slice(0, 400)),
    headings: guess.headings,
    layout: upload.layout ?? guess.layout,
    reason: upload.layout ? null : guess.reason,
    report: upload.report,
    jobId: upload.jobId,
    importId: upload.importId,
    createdAt: upload.createdAt.toISOString(),
  }
}
