/** Waits until the page answers, or says why it never will. */
import { PlainFailure } from './plainFailure.mjs'
import type { Supervised } from './supervise.ts'

const patienceMilliseconds = 180_000
const pollMilliseconds = 100

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

async function answers(address: string, contentType: string): Promise<boolean> {
  try {
    const answer = await fetch(address, { headers: { accept: contentType }, signal: AbortSignal.timeout(2_000) })
    const fits = answer.ok && (answer.headers.get('content-type') ?? '').startsWith(contentType)
    await answer.body?.cancel()
    return fits
  } catch {
    return false
  }
}

/** A page that is served while the server cannot work yet is no live page. */
const isLive = async (address: string): Promise<boolean> =>
  (await answers(`${address}/`, 'text/html')) && (await answers(`${address}/readyz`, 'application/json'))

/** The sentences of a log: lines that are not JSON, and the messages of those that report a fatal fault. */
export function sentencesOf(log: string): string {
  const lines = log.split('\n').flatMap((line) => {
    if (!line.startsWith('{')) return /^\s+at /.test(line) ? [] : [line]
    try {
      const { level, msg } = JSON.parse(line)
      return level === 'fatal' || level === 'error' ? [String(msg)] : []
    } catch {
      return []
    }
  })
  return lines.join('\n').trim()
}

/** Never resolves; rejects with the server's own words when it ends. */
export async function earlyEnd(server: Supervised): Promise<never> {
  const { how, tail } = await server.firstEnd
  throw new PlainFailure(sentencesOf(tail) || `The server ended before its page answered (${how}).`)
}

export async function untilPageAnswers(address: string): Promise<void> {
  const until = performance.now() + patienceMilliseconds
  while (!(await isLive(address))) {
    if (performance.now() > until)
      throw new PlainFailure(`No page at ${address} after ${patienceMilliseconds / 1000} s.`)
    await pause(pollMilliseconds)
  }
}
