import { ref } from 'vue'
import type { SignInRequest } from '../../shared/schemas/session.ts'
import { inWords } from '../api/problem.ts'
import { useSession } from '../stores/session.ts'

/** One attempt at a time, and its fault in words. */
export function useSignIn() {
  const session = useSession()
  const busy = ref(false)
  const fault = ref<string | null>(null)

  async function attempt(credentials: SignInRequest): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = null
    try {
      await session.signIn(credentials)
      return true
    } catch (error) {
      fault.value = inWords(error)
      return false
    } finally {
      busy.value = false
    }
  }

  return { attempt, busy, fault }
}
