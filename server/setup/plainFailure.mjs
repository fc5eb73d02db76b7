/** A failure that the person at the keyboard can mend: shown as its sentence alone, without a stack. */
export class PlainFailure extends Error {
  /**
   * @param {string} sentence
   * @param {ErrorOptions} [options]
   */
  constructor(sentence, options) {
    super(sentence, options)
    this.name = 'PlainFailure'
  }
}

/** @type {Record<string, (path: string) => string>} */
const sentences = {
  ENOSPC: (path) => `The disk is full${path}. Make room and start again; nothing that was acknowledged is lost.`,
  EDQUOT: (path) => `The disk quota is used up${path}. Make room and start again.`,
  EACCES: (path) => `A right is missing${path}: this user may not read or write there.`,
  EPERM: (path) => `A right is missing${path}: this user may not change it.`,
  EROFS: (path) => `The folder is read-only${path}. Offing keeps its data there, or where DATA_DIR says.`,
  EMFILE: () => 'Too many files are open. Raise the limit (ulimit -n) and start again.',
}

/**
 * The sentence for an error, or null when it is one that nobody foresaw.
 * @param {unknown} error
 * @returns {string | null}
 */
export function sentenceFor(error) {
  if (error instanceof PlainFailure) return error.message
  if (!(error instanceof Error) || !('code' in error)) return null
  const path = 'path' in error && error.path ? ` (${error.path})` : ''
  return sentences[String(error.code)]?.(path) ?? null
}

/**
 * Ends the process after saying what is wrong.
 * @param {unknown} error
 * @returns {never}
 */
export function giveUp(error) {
  const sentence = sentenceFor(error)
  if (sentence) console.error(`\n${sentence}`)
  else console.error(error)
  process.exit(1)
}
