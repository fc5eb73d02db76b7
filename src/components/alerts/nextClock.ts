const dayMs = 86_400_000

/** The next moment (ms since 1970) at which UTC clocks show `18:00`; null for what is no time of day. */
export function nextClock(written: string, nowMs: number): number | null {
  const [, hours, minutes] = /^([01]?\d|2[0-3]):?([0-5]\d)$/.exec(written.trim()) ?? []
  if (hours === undefined || minutes === undefined) return null
  const today = Math.floor(nowMs / dayMs) * dayMs + (Number(hours) * 60 + Number(minutes)) * 60_000
  return today > nowMs ? today : today + dayMs
}
