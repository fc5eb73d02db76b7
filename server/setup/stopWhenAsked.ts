/** Ctrl-C and a request to end: once in order, a second time at once. */
import type { RunningParts } from './parts.ts'

/** One Ctrl-C arrives twice: from the terminal and passed on by npm. */
const sameRequestMilliseconds = 500

export function stopWhenAsked(parts: RunningParts): { stopping(): boolean } {
  let askedAt: number | null = null

  function ask(signal: NodeJS.Signals): void {
    const now = performance.now()
    if (askedAt === null) {
      askedAt = now
      console.log(signal === 'SIGINT' ? '\nStopping in order …' : `\n${signal}: stopping in order …`)
      void parts.stop().then(() => process.exit(0))
    } else if (now - askedAt > sameRequestMilliseconds) {
      console.log('Stopping at once.')
      parts.kill()
      process.exit(1)
    }
  }

  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, ask)
  return { stopping: () => askedAt !== null }
}
