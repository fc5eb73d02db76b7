/** Which alert a person is about to act on: by its number, whatever moves on the page meanwhile. */
import { defineStore } from 'pinia'
import { ref } from 'vue'

export const useAlertDialogs = defineStore('alertDialogs', () => {
  const acknowledging = ref<number | null>(null)
  const shelving = ref<number | null>(null)
  return { acknowledging, shelving }
})
