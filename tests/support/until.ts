/** Waits for something to become true, and says what did not. */
const pollMilliseconds = 50

const pause = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds))

export async function until(
  what: string,
  holds: () => boolean | Promise<boolean>,
  patienceMilliseconds: number,
): Promise<void> {
  const end = performance.now() + patienceMilliseconds
  while (!(await holds())) {
    if (performance.now() > end) throw new Error(`Not within ${patienceMilliseconds / 1000} s: ${what}`)
    await pause(pollMilliseconds)
  }
}
