/** Behind the link of an invitation or of a reset; and asking for such a link. */
import { defineStore } from 'pinia'
import { shallowRef } from 'vue'
import type { PassphraseLinkView } from '../../shared/schemas/account.ts'
import * as api from '../api/accounts.ts'

export const usePassphraseLink = defineStore('passphraseLink', () => {
  const link = shallowRef<PassphraseLinkView | null>(null)

  async function read(token: string): Promise<void> {
    link.value = await api.readPassphraseLink(token)
  }
  async function choose(token: string, password: string): Promise<void> {
    await api.choosePassphrase(token, password)
    await read(token)
  }
  async function ask(email: string): Promise<void> {
    await api.askForPassphraseLink(email)
  }

  return { link, read, choose, ask }
})
