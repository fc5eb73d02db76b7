/** One's own account: where one is signed in, passphrase, second factor. */
import { defineStore } from 'pinia'
import { ref, shallowRef } from 'vue'
import type { OwnSession, PassphraseChange } from '../../shared/schemas/account.ts'
import type { SecondFactorOffer, SecondFactorView } from '../../shared/schemas/secondFactor.ts'
import * as api from '../api/accounts.ts'

export const useOwnAccount = defineStore('ownAccount', () => {
  const sessions = shallowRef<OwnSession[]>([])
  const sessionsLoaded = ref(false)
  const factor = shallowRef<SecondFactorView | null>(null)
  /** Not in force yet. */
  const offer = shallowRef<SecondFactorOffer | null>(null)
  /** Shown once, then forgotten. */
  const codes = shallowRef<string[]>([])

  async function readSessions(): Promise<void> {
    sessions.value = await api.readOwnSessions()
    sessionsLoaded.value = true
  }
  async function endSession(id: string): Promise<void> {
    await api.endOwnSession(id)
    await readSessions()
  }
  async function endOthers(): Promise<void> {
    await api.endOtherSessions()
    await readSessions()
  }
  async function changePassphrase(change: PassphraseChange): Promise<void> {
    await api.changePassphrase(change)
    await readSessions()
  }

  async function readFactor(): Promise<void> {
    factor.value = await api.readSecondFactor()
  }
  async function begin(password: string): Promise<void> {
    offer.value = await api.offerSecondFactor(password)
  }
  async function confirm(code: string): Promise<void> {
    codes.value = await api.confirmSecondFactor(code)
    offer.value = null
    await readFactor()
  }
  async function renewCodes(code: string): Promise<void> {
    codes.value = await api.renewRecoveryCodes(code)
    await readFactor()
  }
  async function remove(code: string): Promise<void> {
    await api.removeSecondFactor(code)
    await readFactor()
  }
  function forgetSecrets(): void {
    offer.value = null
    codes.value = []
  }

  return {
    ...{ sessions, sessionsLoaded, factor, offer, codes, readSessions, endSession, endOthers, changePassphrase },
    ...{ readFactor, begin, confirm, renewCodes, remove, forgetSecrets },
  }
})
