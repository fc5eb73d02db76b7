import { rmSync } from 'node:fs'
import { mkdir, rm, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { PlainFailure } from './plainFailure.mjs'
import { pidInFile } from './processLikeness.mjs'

/**
 * Takes the data folder for this start alone until the process ends; what a killed start left does not count.
 * @param {string} dataFolder
 */
export async function holdFolder(dataFolder) {
  const folder = join(dataFolder, 'run')
  const path = join(folder, 'start.pid')
  await mkdir(folder, { recursive: true, mode: 0o700 })
  for (let tries = 0; ; tries += 1) {
    try {
      await writeFile(path, `${process.pid}\n`, { flag: 'wx' })
      break
    } catch (error) {
      if (!(error instanceof Error && 'code' in error && error.code === 'EEXIST') || tries > 2) throw error
      const other = await pidInFile(path, { argument: 'setup/start.mjs' })
      if (other !== null) {
        throw new PlainFailure(
          `Another npm start (process ${other}) already runs in ${dataFolder}. Stop it first, or set DATA_DIR and PORT.`,
        )
      }
      await rm(path, { force: true })
    }
  }
  process.once('exit', () => rmSync(path, { force: true }))
}
