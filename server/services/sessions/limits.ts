/** Without a request and without a live feed for so long, a session ends. */
export const idleMilliseconds = 12 * 3600_000
/** From signing in to read-only. */
export const absoluteMilliseconds = 24 * 3600_000
