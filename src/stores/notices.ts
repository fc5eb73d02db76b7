/** Notices of the browser while the page is not in sight; asked for only after a click. */
import { defineStore } from 'pinia'
import { ref } from 'vue'

export type NoticeState = 'ask' | 'granted' | 'denied' | 'unsupported'

function read(): NoticeState {
  if (!('Notification' in window)) return 'unsupported'
  return Notification.permission === 'default' ? 'ask' : Notification.permission
}

export const useNotices = defineStore('notices', () => {
  const state = ref<NoticeState>(read())

  async function ask(): Promise<void> {
    if (state.value === 'unsupported') return
    await Notification.requestPermission()
    state.value = read()
  }

  function show(alertId: number, title: string): void {
    if (state.value !== 'granted') return
    const notice = new Notification(title, { tag: `alert-${alertId}`, requireInteraction: true })
    notice.onclick = () => {
      window.focus()
      notice.close()
    }
  }

  return { state, ask, show }
})
