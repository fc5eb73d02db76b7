import { ref } from 'vue'
import type { SetUpRequest } from '../../shared/schemas/session.ts'
import { ProblemError, inWords } from '../api/problem.ts'
import { useSession } from '../stores/session.ts'

/** Makes the first administrator; faults that the server finds come back by field or as one sentence. */
export function useFirstAdministrator() {
  const session = useSession()
  const busy = ref(false)
  const fault = ref<string | null>(null)
  const fieldFaults = ref<Record<string, string>>({})

  async function complete(details: SetUpRequest): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = null
    fieldFaults.value = {}
    try {
      await session.completeSetUp(details)
      return true
    } catch (error) {
      const errors = error instanceof ProblemError ? (error.problem.errors ?? []) : []
      fieldFaults.value = Object.fromEntries(errors.map(({ path, message }) => [path.replace(/^\//, ''), message]))
      if (errors.length === 0) fault.value = inWords(error)
      return false
    } finally {
      busy.value = false
    }
  }

  return { complete, busy, fault, fieldFaults }
}
