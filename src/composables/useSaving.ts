import { shallowRef } from 'vue'
import type { z } from 'zod'
import { ProblemError } from '../api/problem.ts'
import { useAttempt } from './useAttempt.ts'

/** An attempt to change a row; where somebody else changed it first, what the server holds now. */
export function useSaving<T extends z.ZodType>(shape: T) {
  const { attempt, forget, busy, fault, fieldFaults } = useAttempt()
  const other = shallowRef<z.infer<T> | null>(null)
  /** Stable name of the last refusal, such as `deployment.checkUnresolved`. */
  const code = shallowRef<string | null>(null)

  async function save(work: () => Promise<unknown>): Promise<boolean> {
    other.value = null
    code.value = null
    return attempt(async () => {
      try {
        await work()
      } catch (error) {
        if (error instanceof ProblemError) {
          code.value = error.code
          const parsed = error.status === 412 ? shape.safeParse(error.problem.current) : null
          if (parsed?.success) other.value = parsed.data
        }
        throw error
      }
    })
  }
  function dismiss(): void {
    other.value = null
    code.value = null
    forget()
  }

  return { save, dismiss, busy, fault, fieldFaults, other, code }
}
