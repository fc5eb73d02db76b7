import { ref, shallowRef } from 'vue'
import { ProblemError, inWords } from '../api/problem.ts'

/** One thing asked of the server at a time; its faults by field, or as one sentence. */
export function useAttempt() {
  const busy = ref(false)
  const fault = ref<string | null>(null)
  const fieldFaults = ref<Record<string, string>>({})
  /** How the thing stands now, where somebody else was quicker; null: nobody was. */
  const current = shallowRef<unknown>(null)

  function forget(): void {
    fault.value = null
    fieldFaults.value = {}
    current.value = null
  }

  /** True when it was done. */
  async function attempt(work: () => Promise<unknown>): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    forget()
    try {
      await work()
      return true
    } catch (error) {
      const errors = error instanceof ProblemError ? (error.problem.errors ?? []) : []
      fieldFaults.value = Object.fromEntries(errors.map(({ path, message }) => [path.replace(/^\//, ''), message]))
      fault.value = inWords(error)
      current.value = error instanceof ProblemError ? (error.problem.current ?? null) : null
      return false
    } finally {
      busy.value = false
    }
  }

  return { attempt, forget, busy, fault, fieldFaults, current }
}
