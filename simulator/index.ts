/** The simulator's process: `npm run simulate -- --help`. */
import { seaSource } from './client/seaSource.ts'
import { linkStandsAt } from './client/linkSchedule.ts'
import { stream, type Streaming } from './client/stream.ts'
import { systemClock } from './clock.ts'
import { helpText } from './help.ts'
import { readOptions, type Options } from './options.ts'
import { writePast } from './past/writePast.ts'
import { readRecording } from './replay/recording.ts'
import { recordingSource, wholeSeconds } from './replay/recordingSource.ts'
import { serveTruth } from './truthServer.ts'
import { UsageError } from './usageError.ts'

const say = (sentence: string): void => console.log(sentence)

async function run(options: Options): Promise<number> {
  switch (options.mode) {
    case 'help':
      process.stdout.write(helpText)
      return 0
    case 'write-past':
      writePast({ ...options, madeAt: systemClock.now(), say })
      return 0
    case 'replay':
      return untilStopped(startReplay(options))
    case 'stream':
      return untilStopped(await startSea(options))
  }
}

async function startSea(options: Extract<Options, { mode: 'stream' }>): Promise<Streaming> {
  const { sea, stations } = options
  if (options.truthPort !== null) {
    const server = await serveTruth(options.truthPort, sea, stations, systemClock)
    const address = server.address()
    if (address && typeof address === 'object')
      say(`truth at http://127.0.0.1:${address.port}/truth?station=${stations[0].code}`)
    server.unref()
  }
  say(`scenario ${sea.scenario.name}, seed ${sea.seed}, anchor ${new Date(sea.anchor).toISOString()}`)
  const sources = stations.map((station) => seaSource(sea, station))
  const linkStands = (time: number) => linkStandsAt(sea.scenario.link, sea.anchor, time)
  return stream(sources, options.stream, linkStands, systemClock, say)
}

function startReplay(options: Extract<Options, { mode: 'replay' }>): Streaming {
  const recording = readRecording(options.stationFile, options.readingsFile)
  const now = Math.floor(systemClock.now() / 1000) * 1000
  const startAt = options.live ? now : now - 1000 * wholeSeconds(recording)
  say(`${options.as}: ${wholeSeconds(recording)} s of recording, from ${new Date(startAt).toISOString()}`)
  const source = recordingSource(recording, options.as, startAt)
  return stream([source], { ...options.stream, startAt }, () => true, systemClock, say)
}

/** 0 when stopped or all sent, 1 when the server wants no station any more. */
async function untilStopped(streaming: Streaming): Promise<number> {
  const stopped = new Promise<boolean>((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM'] as const) {
      process.once(signal, () => {
        streaming.stop()
        resolve(true)
      })
    }
  })
  return (await Promise.race([streaming.ended, stopped])) ? 0 : 1
}

try {
  process.exitCode = await run(readOptions(process.argv.slice(2), systemClock.now()))
  // A socket that does not close in time must not hold the process.
  setTimeout(() => process.exit(), 2000).unref()
} catch (error) {
  if (!(error instanceof UsageError)) throw error
  console.error(error.message)
  process.exitCode = 2
}
