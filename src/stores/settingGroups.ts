/** Settings of the installation, group by group, for administrators. */
import { defineStore } from 'pinia'
import { ref, shallowReactive, shallowRef } from 'vue'
import type { SettingVersionView } from '../../shared/schemas/settingGroups.ts'
import * as api from '../api/office.ts'
import { useSettings } from './settings.ts'

export const useSettingGroups = defineStore('settingGroups', () => {
  const held = shallowReactive(new Map<string, SettingVersionView>())
  const loaded = ref(false)
  /** Of one group, newest first. */
  const versions = shallowRef<SettingVersionView[]>([])
  const of = (group: string): SettingVersionView | undefined => held.get(group)

  async function read(): Promise<void> {
    for (const one of await api.readSettingGroups()) held.set(one.group, one)
    loaded.value = true
  }
  function apply(version: SettingVersionView): void {
    held.set(version.group, version)
  }
  async function readVersions(group: string): Promise<void> {
    versions.value = await api.readSettingVersions(group)
  }
  /** `from`: the version that was on the screen. */
  async function change(from: SettingVersionView, content: Record<string, unknown>, reason: string): Promise<void> {
    apply(await api.changeSettings(from.group, from.number, { content, reason }))
    await useSettings().load()
  }
  async function goBack(from: SettingVersionView, number: number, reason: string): Promise<void> {
    apply(await api.returnSettings(from.group, from.number, { number, reason }))
    await Promise.all([readVersions(from.group), useSettings().load()])
  }

  return { of, loaded, versions, read, apply, readVersions, change, goBack }
})
