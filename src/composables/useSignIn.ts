import { ref } from 'vue'
import type { SignInRequest } from '../../shared/schemas/session.ts'
import { ProblemError, inWords } from '../api/problem.ts'
import { useSession } from '../stores/session.ts'

/** One attempt at a time, and its fault in words. */
export function useSignIn() {
  const session = useSession()
  const busy = ref(false)
  const fault = ref<string | null>(null)
  /** The passphrase fits, and the account asks for a code too. */
  const asksCode = ref(false)

  async function attempt(credentials: SignInRequest): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = null
    try {
      await session.signIn(credentials)
      return true
    } catch (error) {
      const code = error instanceof ProblemError ? error.code : ''
      if (code === 'session.codeNeeded') asksCode.value = true
      else if (code === 'session.wrongPassword') asksCode.value = false
      fault.value = code === 'session.codeNeeded' ? null : inWords(error)
      return false
    } finally {
      busy.value = false
    }
  }

  return { attempt, busy, fault, asksCode }
}
