/** Something the person at the command line has to put right: one sentence, exit code 2. */
export class UsageError extends Error {
  override name = 'UsageError'
}
