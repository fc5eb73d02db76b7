import type { Problem } from '../../shared/schemas/problem.ts'

/** The server answered, and refused: an RFC 9457 problem. */
export class ProblemError extends Error {
  readonly problem: Problem

  constructor(problem: Problem) {
    super(problem.detail ?? problem.title)
    this.name = 'ProblemError'
    this.problem = problem
  }

  get code(): string {
    return this.problem.code
  }

  get status(): number {
    return this.problem.status
  }
}

/** No answer came, or one that is none of ours: nothing is known of what the server did. */
export class ContactError extends Error {
  constructor(message: string, options?: ErrorOptions) {
    super(message, options)
    this.name = 'ContactError'
  }
}

/** One sentence for the person at the desk. */
export function inWords(error: unknown): string {
  if (error instanceof ProblemError) return error.message
  if (error instanceof ContactError) return 'No answer from the server. Nothing was changed on this screen.'
  return 'This did not work, and the program does not know why.'
}
