/** How the installation is doing. */
import { defineStore } from 'pinia'
import { shallowRef } from 'vue'
import type { SystemView } from '../../shared/schemas/system.ts'
import { readSystem } from '../api/office.ts'

export const useSystem = defineStore('system', () => {
  const system = shallowRef<SystemView | null>(null)
  async function read(): Promise<void> {
    system.value = await readSystem()
  }
  return { system, read }
})
