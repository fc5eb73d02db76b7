/** People as accounts, for administrators. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive } from 'vue'
import type { AccountChange, AccountView, Invitation, OwnSession } from '../../shared/schemas/account.ts'
import * as api from '../api/accounts.ts'

export const useAccounts = defineStore('accounts', () => {
  const held = shallowReactive(new Map<number, AccountView>())
  const loaded = ref(false)
  const all = computed(() => [...held.values()].sort((a, b) => a.name.localeCompare(b.name)))
  const byId = (id: number): AccountView | undefined => held.get(id)

  function apply(account: AccountView): AccountView {
    held.set(account.id, account)
    return account
  }
  async function read(): Promise<void> {
    const found = await api.readAccounts()
    held.clear()
    for (const account of found) held.set(account.id, account)
    loaded.value = true
  }
  const invite = async (invitation: Invitation): Promise<AccountView> => apply(await api.invite(invitation))
  const change = async (account: AccountView, next: AccountChange): Promise<AccountView> =>
    apply(await api.changeAccount(account.id, account.version, next))
  const setDisabled = async (account: AccountView, isDisabled: boolean): Promise<AccountView> =>
    apply(await api.setDisabled(account.id, account.version, isDisabled))
  const sendLink = async ({ id }: AccountView): Promise<AccountView> => apply(await api.sendLink(id))
  const resetSecondFactor = async ({ id }: AccountView): Promise<AccountView> => apply(await api.resetSecondFactor(id))
  const endSessions = async ({ id }: AccountView): Promise<AccountView> => apply(await api.endSessionsOf(id))
  const sessionsOf = ({ id }: AccountView): Promise<OwnSession[]> => api.readSessionsOf(id)

  return {
    ...{ all, loaded, byId, apply, read, invite, change, setDisabled, sendLink, resetSecondFactor },
    ...{ endSessions, sessionsOf },
  }
})
