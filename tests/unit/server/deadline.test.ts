import { afterEach, beforeEach, expect, test, vi } from 'vitest'
import { withDeadline } from '../../../server/middleware/deadline.ts'

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

test('work that is done in time gives its result, and leaves no timer behind', async () => {
  expect(await withDeadline(Promise.resolve(7), 5000)).toBe(7)
  expect(vi.getTimerCount()).toBe(0)
})

test('work that stalls is answered as a database that does not answer', async () => {
  const stalled = expect(withDeadline(new Promise(() => undefined), 5000)).rejects.toMatchObject({
    refusal: { status: 503, code: 'database.unavailable', retryAfterSeconds: 2 },
  })
  await vi.advanceTimersByTimeAsync(5000)
  await stalled
})
