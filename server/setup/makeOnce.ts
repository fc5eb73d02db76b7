/** What a first start makes and later ones find: the built client, the demonstration's past. */
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { pastManifest } from '../../shared/demonstration/past.ts'
import { buildClient, staleClient } from './clientBuild.ts'
import { PlainFailure } from './plainFailure.mjs'
import { step } from './progress.mjs'
import { runProgram } from './runProgram.mjs'

export async function makeClient(root: string): Promise<void> {
  const stale = await staleClient(root)
  if (stale !== null) await step('client', () => buildClient(root, stale))
}

/** When the past ends, ms since 1970 UTC; null when there is none. */
export async function endOfPast(folder: string): Promise<number | null> {
  const text = await readFile(join(folder, 'manifest.json'), 'utf8').catch(() => null)
  return text === null ? null : Date.parse(pastManifest.parse(JSON.parse(text)).until)
}

/** Twelve hours of readings up to now and a year of seas. The live stream goes on where it ends. */
export async function makePast(root: string, folder: string, simulatorScript: string, scenario: string): Promise<void> {
  if ((await endOfPast(folder)) !== null) return
  const args = ['--import', 'tsx', simulatorScript, '--write-past', folder, '--scenario', scenario]
  await step('the demonstration’s past', async (note) => {
    const { code, tail } = await runProgram(process.execPath, args, { cwd: root, onLine: note })
    if (code === 0) return
    if (/ENOSPC/.test(tail))
      throw new PlainFailure(`The disk is full: no room for the demonstration's past in ${folder}.`)
    throw new PlainFailure(`The demonstration's past could not be made:\n${tail}`)
  })
}
