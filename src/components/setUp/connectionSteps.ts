/** The way to a first connection, each step done, waited for, or wrong with what to do. Pure. */
import type { ConnectionAttempt } from '../../../shared/schemas/stationSetUpLink.ts'

export interface ConnectionStep {
  title: string
  state: 'done' | 'waiting' | 'wrong'
  words: string
  details: string[]
}

interface Known {
  hasDeployment: boolean
  hasKey: boolean
  /** Newest attempt of the station, or of a key that nobody knows; null: none since the server started. */
  newest: ConnectionAttempt | null
}

const order = ['opened', 'keyAccepted', 'welcomed', 'streaming'] as const

export function connectionSteps({ hasDeployment, hasKey, newest }: Known): ConnectionStep[] {
  const reached = newest ? order.indexOf(newest.reached) : -1
  /** The trouble stands at the step that was not reached, or at the last one. */
  const wrongAt = newest?.trouble ? Math.min(reached + 1, order.length - 1) : -1
  const trouble = newest?.trouble ?? ''
  const step = (at: number, title: string, done: string, waiting: string, details: string[] = []): ConnectionStep => {
    if (at === wrongAt) return { title, state: 'wrong', words: trouble, details }
    return { title, state: reached >= at ? 'done' : 'waiting', words: reached >= at ? done : waiting, details: [] }
  }
  const refused = (newest?.refusals ?? []).map(({ code, count, detail }) => `${count} refused, ${code}: ${detail}`)
  const streaming = newest
    ? `${newest.frames} frames received, all up to number ${newest.acknowledged} on disk.${newest.endedAt === null ? '' : ' The connection is closed now.'}`
    : ''
  return [
    {
      title: 'The array is in force',
      state: hasDeployment ? 'done' : 'waiting',
      words: hasDeployment
        ? 'Its sensors and sample rate are what a hello has to fit.'
        : 'Draw it and put it in force first.',
      details: [],
    },
    {
      title: 'A key is issued',
      state: hasKey ? 'done' : 'waiting',
      words: hasKey ? 'The station needs it to connect.' : 'Issue one here.',
      details: [],
    },
    step(0, 'It reaches this server', newest ? `From ${newest.remoteAddress}.` : '', 'Nothing has knocked here since the server started.'), // prettier-ignore
    step(1, 'Its key is accepted', newest?.keyPrefix ? `Key ${newest.keyPrefix}…` : 'The key fits.', 'Waits for a connection.'), // prettier-ignore
    step(2, 'Its hello fits', helloWords(newest), 'Waits for its hello.', newest?.differences ?? []),
    { ...step(3, 'Its readings are stored', streaming, 'Waits for its first frame.', refused), ...(wrongAt !== 3 && refused.length > 0 && { details: refused }) }, // prettier-ignore
  ]
}

function helloWords(newest: ConnectionAttempt | null): string {
  if (!newest?.hello) return 'It is welcome.'
  const { software, sensors, sampleRate, clockOffsetSeconds } = newest.hello
  return `${software}, ${sensors.length} sensors at ${sampleRate} Hz, its clock ${clockOffsetSeconds.toFixed(2)} s off.`
}
