/** Lets so many frames a second through, with a little in hand for the ones that come at once. */
export interface Pace {
  /** Whether one more frame may go now. */
  take(now: number): boolean
  /** The server found it too fast. */
  slowDown(): void
}

export function createPace(framesPerSecond: number, now: number): Pace {
  let rate = framesPerSecond
  let inHand = 1
  let countedAt = now
  return {
    take(time) {
      inHand = Math.min(Math.max(1, rate / 2), inHand + (rate * Math.max(0, time - countedAt)) / 1000)
      countedAt = time
      if (inHand < 1) return false
      inHand -= 1
      return true
    },
    slowDown() {
      rate = Math.max(2, rate / 2)
    },
  }
}
