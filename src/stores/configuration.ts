/** The whole configuration as a file: compared, put in force, taken back. */
import { defineStore } from 'pinia'
import { shallowRef } from 'vue'
import { configuration } from '../../shared/schemas/configuration.ts'
import type { AppliedConfiguration, Comparison, Configuration } from '../../shared/schemas/configuration.ts'
import * as api from '../api/office.ts'
import { useSettingGroups } from './settingGroups.ts'

export const useConfiguration = defineStore('configuration', () => {
  const applied = shallowRef<AppliedConfiguration[]>([])
  const file = shallowRef<Configuration | null>(null)
  const compared = shallowRef<Comparison | null>(null)

  /** Why this text is no configuration, in words; null: it is one. */
  function take(text: string): string | null {
    file.value = compared.value = null
    try {
      const parsed = configuration.safeParse(JSON.parse(text))
      if (parsed.success) {
        file.value = parsed.data
        return null
      }
      const [issue] = parsed.error.issues
      return `${issue?.path.join('.') || 'The file'}: ${issue?.message ?? 'is no configuration'}`
    } catch {
      return 'The file is no JSON: choose one that was exported here or at another office.'
    }
  }
  async function compare(): Promise<void> {
    if (file.value) compared.value = await api.compareConfiguration(file.value)
  }
  async function apply(reason: string): Promise<void> {
    if (!file.value || !compared.value) return
    await api.applyConfiguration({ file: file.value, basis: compared.value.basis, reason })
    forget()
    await Promise.all([readApplied(), useSettingGroups().read()])
  }
  async function rollBack(id: number, reason: string): Promise<void> {
    await api.rollBackConfiguration(id, reason)
    await Promise.all([readApplied(), useSettingGroups().read()])
  }
  async function readApplied(): Promise<void> {
    applied.value = await api.readApplied()
  }
  function forget(): void {
    file.value = compared.value = null
  }

  return { applied, file, compared, take, compare, apply, rollBack, readApplied, forget }
})
