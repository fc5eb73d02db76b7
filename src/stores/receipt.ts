/** The page behind the link of an e-mail: looked at without signing in, confirmed by one press. */
import { defineStore } from 'pinia'
import { shallowRef } from 'vue'
import type { ReceiptView } from '../../shared/schemas/message.ts'
import * as api from '../api/messages.ts'

export const useReceipt = defineStore('receipt', () => {
  const receipt = shallowRef<ReceiptView | null>(null)
  const read = async (token: string): Promise<void> => void (receipt.value = await api.readReceipt(token))
  const confirm = async (token: string): Promise<void> => void (receipt.value = await api.confirmReceipt(token))
  return { receipt, read, confirm }
})
