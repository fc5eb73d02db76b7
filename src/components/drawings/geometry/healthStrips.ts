/** Hours of sensors in rows: what was expected of each and what share of it came. */
export interface SensorHour {
  hour: string
  letter: string
  expected: number
  received: number
}

export interface StripRow {
  letter: string
  /** Of the whole span; null where nothing was expected. */
  share: number | null
  /** Hours in which something was expected, rising. */
  hours: { ms: number; share: number }[]
}

export function stripRows(
  hours: readonly SensorHour[],
  letters: readonly string[],
  fromMs: number,
  toMs: number,
): StripRow[] {
  return letters.map((letter) => {
    const own = hours
      .filter((one) => one.letter === letter && one.expected > 0)
      .map((one) => ({ ...one, ms: Date.parse(one.hour) }))
      .filter(({ ms }) => ms >= fromMs && ms < toMs)
      .sort((a, b) => a.ms - b.ms)
    const expected = own.reduce((sum, one) => sum + one.expected, 0)
    const received = own.reduce((sum, one) => sum + Math.min(one.received, one.expected), 0)
    return {
      letter,
      share: expected > 0 ? received / expected : null,
      hours: own.map((one) => ({ ms: one.ms, share: Math.min(1, one.received / one.expected) })),
    }
  })
}

const dayMs = 86_400_000

/** Midnights UTC within the span. */
export function dayStarts(fromMs: number, toMs: number): number[] {
  const starts: number[] = []
  for (let ms = Math.ceil(fromMs / dayMs) * dayMs; ms < toMs; ms += dayMs) starts.push(ms)
  return starts
}
