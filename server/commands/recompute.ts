/**
 * `npm run recompute -- --check 100`: computes so many stored estimates, drawn by chance, again from the stored readings and compares
 * the results bit for bit. It reads only, beside a running server. The database is that of DATABASE_URL, else the demonstration's.
 * Exit codes: 0 all that this version of the program made are equal; 1 one of them differs; 2 nothing could be compared.
 */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { estimate } from '../../shared/waves/estimate.ts'
import { createDatabase } from '../config/database.ts'
import { softwareVersion } from '../config/softwareVersion.ts'
import { chanceEstimates, readTimelines } from '../services/estimates.ts'
import type { StationTimeline, StoredEstimate } from '../services/estimates.ts'
import { digestAgain } from './recompute/digestAgain.ts'

const say = (sentence: string): void => void process.stdout.write(`${sentence}\n`)

function refuse(sentence: string): never {
  process.stderr.write(`${sentence}\n`)
  process.exit(2)
}

function wantedCount(words: readonly string[]): number {
  const [flag, number = '100'] = words
  const count = Number(number)
  if (flag !== '--check' || !Number.isInteger(count) || count < 1 || count > 10_000)
    return refuse('npm run recompute -- --check 100: how many stored estimates to compute again, 1 to 10000')
  return count
}

/** The demonstration writes the address of its own database beside it while it runs. */
function databaseUrl(): string {
  if (process.env.DATABASE_URL) return process.env.DATABASE_URL
  try {
    return readFileSync(join(process.env.DATA_DIR ?? 'var', 'database', 'url'), 'utf8').trim()
  } catch {
    return refuse('Set DATABASE_URL, or start the demonstration first: its database is used then.')
  }
}

const nameOf = ({ code }: StationTimeline, { windowEndsAt, revision }: StoredEstimate): string =>
  `${code}/${windowEndsAt.toISOString()}/${revision}`

async function check(count: number): Promise<number> {
  const sequelize = createDatabase({ url: databaseUrl(), poolSize: 2 })
  const timelines = new Map((await readTimelines(sequelize)).map((timeline) => [timeline.id, timeline]))
  const drawn = await chanceEstimates({ sequelize }, [...timelines.keys()], count, Math.random)
  const outcome = { same: 0, differs: 0, otherVersion: 0, otherVersionSame: 0, gone: 0 }
  for (const stored of drawn) {
    const timeline = timelines.get(stored.stationId)
    const digest = timeline ? await digestAgain({ sequelize }, timeline, stored, estimate) : null
    const isOwn = stored.softwareVersion === softwareVersion
    const isSame = digest === stored.resultDigest
    if (!timeline || digest === null) outcome.gone += 1
    else if (isOwn && isSame) outcome.same += 1
    else if (isOwn) {
      outcome.differs += 1
      say(`differs: ${nameOf(timeline, stored)}, ${stored.resultDigest.slice(0, 12)} became ${digest.slice(0, 12)}`)
    } else if (isSame) outcome.otherVersionSame += 1
    else {
      outcome.otherVersion += 1
      say(`differs, made by version ${stored.softwareVersion}: ${nameOf(timeline, stored)}`)
    }
  }
  await sequelize.close()
  const { same, differs, otherVersion, otherVersionSame, gone } = outcome
  say(`${drawn.length} estimates drawn, version ${softwareVersion}`)
  say(`${same} equal bit for bit, ${differs} different`)
  say(`of other versions: ${otherVersionSame} equal, ${otherVersion} different`)
  if (gone > 0) say(`${gone} whose readings, survey or settings are gone`)
  if (same + differs + otherVersion + otherVersionSame === 0) return 2
  return differs > 0 ? 1 : 0
}

process.exitCode = await check(wantedCount(process.argv.slice(2)))
