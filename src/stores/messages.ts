/** The outbox as it stands. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive } from 'vue'
import type { z } from 'zod'
import { messageView } from '../../shared/schemas/message.ts'
import type { messageDetail, MessageView } from '../../shared/schemas/message.ts'
import * as api from '../api/messages.ts'
import { useLive } from './live.ts'

export type MessageDetail = z.infer<typeof messageDetail>

export const useMessages = defineStore('messages', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, MessageView>())
  const details = shallowReactive(new Map<number, MessageDetail>())
  const next = ref<number | null>(null)
  const loaded = ref(false)

  const all = computed(() => [...held.values()].sort((a, b) => b.id - a.id))
  const detail = (id: number): MessageDetail | null => details.get(id) ?? null

  /** States only move on: the newest answer holds. */
  function apply(message: MessageView | MessageDetail): void {
    if ('text' in message) {
      const { text: _, html: __, ...line } = message
      details.set(message.id, message)
      held.set(message.id, line)
      return
    }
    held.set(message.id, message)
    const whole = details.get(message.id)
    if (whole) details.set(message.id, { ...whole, ...message })
  }

  async function read(before?: number): Promise<void> {
    const answer = await api.readMessages(before)
    for (const message of answer.messages) apply(message)
    if (before !== undefined || !loaded.value) next.value = answer.next
    loaded.value = true
  }

  let leaveRoom: (() => void) | null = null
  function watchAll(): () => void {
    leaveRoom ??= live.join('messages', {
      hydrate: () => read(),
      apply(event) {
        const parsed = messageView.safeParse(event.body)
        if (event.kind === 'message' && parsed.success) apply(parsed.data)
      },
    })
    return () => {
      leaveRoom?.()
      leaveRoom = null
    }
  }

  /** However old they are, so that a filter over what is held leaves none out. */
  async function readNotOut(): Promise<void> {
    for (const message of (await api.readNotOut()).messages) apply(message)
  }
  const readOlder = async (): Promise<void> => (next.value === null ? undefined : read(next.value))
  const open = async (id: number): Promise<void> => apply(await api.readMessage(id))
  const retry = async (deliveryId: number): Promise<void> => apply(await api.retryDelivery(deliveryId))
  async function sendTest(personId: number): Promise<number> {
    const message = await api.sendTest(personId)
    apply(message)
    return message.id
  }

  return {
    ...{ all, loaded, next, detail, apply, watchAll, readNotOut, readOlder, open, retry, sendTest },
    readCaughtMails: api.readCaughtMails,
    readCaughtMail: api.readCaughtMail,
  }
})
