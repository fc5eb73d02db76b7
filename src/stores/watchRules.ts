/** What the office has agreed: the daily e-mail, and who must consent to urgent limits. */
import { defineStore } from 'pinia'
import { computed, shallowRef } from 'vue'
import type { DailyEmail, DailyEmailView, WatchRules, WatchRulesView } from '../../shared/schemas/watchRules.ts'
import * as api from '../api/watchRules.ts'

export const useWatchRules = defineStore('watchRules', () => {
  const dailyEmail = shallowRef<DailyEmailView | null>(null)
  const rules = shallowRef<WatchRulesView | null>(null)
  /** As long as the rule is not known, it is taken to hold. */
  const asksSecondPerson = computed(() => rules.value?.content.asksSecondPerson ?? true)

  async function read(): Promise<void> {
    const answers = await Promise.all([api.readDailyEmail(), api.readWatchRules()])
    dailyEmail.value = answers[0]
    rules.value = answers[1]
  }
  async function changeDailyEmail(content: DailyEmail, reason: string): Promise<void> {
    if (dailyEmail.value) dailyEmail.value = await api.changeDailyEmail(dailyEmail.value.version, content, reason)
  }
  async function changeRules(content: WatchRules, reason: string): Promise<void> {
    if (rules.value) rules.value = await api.changeWatchRules(rules.value.version, content, reason)
  }
  return { dailyEmail, rules, asksSecondPerson, read, changeDailyEmail, changeRules }
})
