import { onBeforeUnmount, shallowRef, watch } from 'vue'
import type { Ref } from 'vue'
import { checkDesign } from '../../shared/arrayDesign/checkDesign.ts'
import type { DesignedArray } from '../../shared/arrayDesign/checkDesign.ts'
import type { DesignCheck, DesignQuestion } from '../../shared/schemas/stationSetUpDesign.ts'

/** Hands that drag or type are waited for. */
const patienceMs = 120

/** The check of the array as it stands, worked out again a moment after it last changed; null while it cannot be. */
export function useDesignCheck(asked: Readonly<Ref<{ array: DesignedArray; question: DesignQuestion } | null>>) {
  const check = shallowRef<DesignCheck | null>(null)
  let pause: ReturnType<typeof setTimeout> | undefined
  const work = (): void => {
    check.value = asked.value ? checkDesign(asked.value.array, asked.value.question) : null
  }
  watch(
    asked,
    () => {
      clearTimeout(pause)
      if (check.value === null) work()
      else pause = setTimeout(work, patienceMs)
    },
    { immediate: true },
  )
  onBeforeUnmount(() => clearTimeout(pause))
  return check
}
