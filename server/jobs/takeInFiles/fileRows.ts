/** Rows of an uploaded file as they are asked for, with its faults by line and its progress. */
import { createRowReader } from '../../../shared/uploads/rowReader.ts'
import type { ReadRow } from '../../../shared/uploads/rowReader.ts'
import { columnsFor, fileLines, LineTooLong } from '../../services/uploads.ts'
import type { UploadFile } from '../../services/uploads.ts'
import type { Parts } from '../../config/parts.ts'

export interface FileFault {
  row: number | null
  reason: string
}

export interface FileRows {
  rows: AsyncGenerator<ReadRow & { line: number }>
  /** Filled as the rows are read. */
  faults: FileFault[]
}

const mostFaults = 100

/** `goOn` hears the share that is read, and whether to: it throws to stop. */
export async function fileRows(
  parts: Pick<Parts, 'sequelize'>,
  file: UploadFile,
  goOn: (share: number) => Promise<void>,
): Promise<FileRows> {
  const columns = await columnsFor(parts, file)
  const faults: FileFault[] = []
  const kindOf = (letter: string) => columns.find((column) => column.letter === letter)?.kind
  const { linesAbove } = file.layout

  async function* rows(): FileRows['rows'] {
    let line = 0
    let reader: ReturnType<typeof createRowReader> | null = null
    for await (const { lines, bytes } of fileLines(file.path)) {
      await goOn(Math.min(1, bytes / Math.max(1, file.bytes)))
      for (const text of lines) {
        line += 1
        if (line <= linesAbove) continue
        if (reader === null) {
          reader = createRowReader(text, file.layout, kindOf)
          if (typeof reader !== 'function') {
            faults.push(...reader.map((reason) => ({ row: line, reason })))
            return
          }
          continue
        }
        if (typeof reader !== 'function' || text.trim() === '') continue
        const row = reader(text)
        if (typeof row !== 'string') yield { ...row, line }
        else if (faults.push({ row: line, reason: row }) >= mostFaults) return
      }
    }
    if (reader === null) faults.push({ row: null, reason: 'the file ends above its heading' })
  }

  return { rows: guarded(rows(), faults), faults }
}

async function* guarded(rows: FileRows['rows'], faults: FileFault[]): FileRows['rows'] {
  try {
    yield* rows
  } catch (error) {
    if (!(error instanceof LineTooLong)) throw error
    faults.push({ row: null, reason: 'a line is longer than any row can be: the file is no list of readings' })
  }
}
