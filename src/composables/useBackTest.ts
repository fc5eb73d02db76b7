import { computed, onBeforeUnmount, ref, shallowRef, watch } from 'vue'
import type { Ref } from 'vue'
import { quantityOf } from '../../shared/alerts/quantities.ts'
import type { BackTestView } from '../../shared/schemas/backTest.ts'
import type { Condition, SubjectKind } from '../../shared/schemas/limit.ts'
import { inWords } from '../api/problem.ts'
import { useLimits } from '../stores/limits.ts'

export type BackTestDays = 7 | 30 | 365

/** Hands that drag or type are waited for. */
const patienceMs = 400

interface Draft {
  subjectKind: SubjectKind
  subjectId: number | null
  /** Null while the form cannot be read. */
  condition: Condition | null
}

/** Steps to lay beside a draft, about a tenth of the value that raises. */
export function shiftsBeside(condition: Condition): number[] {
  const [first] = condition.comparisons
  if (first.kind === 'sector' || first.raise === 0) return []
  const { toUnit, decimals } = quantityOf(first.quantity)
  const shown = Math.abs(first.raise * toUnit)
  const power = 10 ** Math.max(-decimals, Math.floor(Math.log10(shown)) - 1)
  const step = Math.max(10 ** -decimals, Math.round((shown * 0.1) / power) * power) / toUnit
  return [-step, step, 2 * step].filter((shift) => first.raise + shift > 0)
}

/** The draft over stored figures, asked again a moment after it last changed; the newest question alone is shown. */
export function useBackTest(draft: Readonly<Ref<Draft>>) {
  const limits = useLimits()
  const days = ref<BackTestDays>(30)
  const view = shallowRef<BackTestView | null>(null)
  const busy = ref(false)
  const fault = ref<string | null>(null)
  let pause: ReturnType<typeof setTimeout> | undefined
  let asked = 0

  /** What can be tried: waves of a station. */
  const question = computed(() => {
    const { subjectKind, subjectId, condition } = draft.value
    if (subjectKind === 'system' || subjectId === null || condition === null) return null
    if (condition.comparisons.some(({ quantity }) => quantityOf(quantity).limitClass === 'dataHealth')) return null
    return { subjectKind, subjectId, condition, days: days.value, shifts: shiftsBeside(condition) }
  })

  async function ask(): Promise<void> {
    if (!question.value) return
    const mine = (asked += 1)
    busy.value = true
    try {
      const answer = await limits.backTest(question.value)
      if (mine !== asked) return
      view.value = answer
      fault.value = null
    } catch (error) {
      if (mine === asked) fault.value = inWords(error)
    } finally {
      if (mine === asked) busy.value = false
    }
  }

  watch(
    () => JSON.stringify(question.value),
    (next, before) => {
      clearTimeout(pause)
      if (question.value && next !== before) pause = setTimeout(() => void ask(), before === undefined ? 0 : patienceMs)
    },
    { immediate: true },
  )
  onBeforeUnmount(() => clearTimeout(pause))

  return { days, view, busy, fault, question, ask }
}
