/** Plays stations to a server until it is told to stop or no station is wanted any more. */
import { join } from 'node:path'
import type { SimulatorClock } from '../clock.ts'
import type { StreamOptions } from '../options.ts'
import { hashText, uniforms } from '../sea/random.ts'
import type { FrameSource } from './frameSource.ts'
import { openLedger } from './ledger.ts'
import { createPace } from './pace.ts'
import { keepStationLink } from './stationLink.ts'

/** Frames a second of back-fill; a server takes up to 50. */
const backfillPace = 49

export interface Streaming {
  stop(): void
  /** Resolves when no station is left: true when each ended well. */
  ended: Promise<boolean>
}

export function stream(
  sources: FrameSource[],
  options: StreamOptions,
  linkStands: (time: number) => boolean,
  clock: SimulatorClock,
  say: (sentence: string) => void,
): Streaming {
  let left = sources.length
  let well = true
  let finish: (well: boolean) => void
  const ended = new Promise<boolean>((resolve) => (finish = resolve))
  const links = sources.map((source) => {
    const now = clock.now()
    const file = options.stateDirectory === null ? null : join(options.stateDirectory, `${source.code}.json`)
    const ledger = openLedger(file, options.startAt, now)
    const origin = ledger.startOf(ledger.acknowledged() + 1)
    const { rate } = options
    return keepStationLink({
      source,
      ledger,
      pace: createPace(rate === null ? backfillPace : rate * 1.1, now),
      clock,
      url: options.url,
      key: options.keys[source.code],
      keysFile: options.keysFile,
      instrumentTime: rate === null ? () => clock.now() : () => origin + (clock.now() - now) * rate,
      linkStands,
      chance: uniforms(hashText(`${source.code}/${now}`)),
      say,
      onEnd({ failed, why }) {
        say(why)
        well &&= !failed
        if (--left === 0) finish(well)
      },
    })
  })
  return { stop: () => links.forEach((link) => link.stop()), ended }
}
