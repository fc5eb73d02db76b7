const firstWord = 4_000
const nextWord = 10_000

/** @param {number} since milliseconds of performance.now() */
const elapsed = (since) => `${((performance.now() - since) / 1000).toFixed(1).padStart(6)} s`

/**
 * Runs one step of a long business and says how far it is: a line when it takes long, a line when it is done.
 * Steps may run side by side, so every line names its step.
 * @template T
 * @param {string} title
 * @param {(note: (text: string) => void) => Promise<T>} work `note` gives the next progress line something to say
 * @returns {Promise<T>}
 */
export async function step(title, work) {
  const since = performance.now()
  const name = title.padEnd(30)
  let latest = ''
  const say = () => console.log(`  ${name} ${elapsed(since)}  ${latest || 'still at it'}`)
  let timer = setTimeout(function again() {
    say()
    timer = setTimeout(again, nextWord)
  }, firstWord)
  try {
    const result = await work((text) => (latest = text))
    console.log(`  ${name} ${elapsed(since)}  done`)
    return result
  } catch (error) {
    console.log(`  ${name} ${elapsed(since)}  failed`)
    throw error
  } finally {
    clearTimeout(timer)
  }
}
