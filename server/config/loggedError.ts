/** What the log keeps of an error. The text of a statement carries its values (names, addresses, hashes), so it is left out. */

/** The driver writes the statement behind its message, up to the first line of the stack. */
const withoutStatement = (text: string): string => text.replace(/\r?\nsql: [\s\S]*?(?=\n\s+at |$)/, '')

export function loggedError(error: unknown): unknown {
  if (!(error instanceof Error)) return error
  const { name, message, stack, cause } = error
  const code = 'code' in error ? String(error.code) : undefined
  return {
    type: name,
    message: withoutStatement(message),
    ...(code !== undefined && { code }),
    ...(stack !== undefined && { stack: withoutStatement(stack) }),
    ...(cause instanceof Error && { cause: loggedError(cause) }),
  }
}
