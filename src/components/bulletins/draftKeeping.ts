/** A draft is kept on the server as it is typed; while it is not, this browser keeps it over a reload. */
import { computed, onBeforeUnmount, ref, shallowRef, watch } from 'vue'
import { bulletinDraft, bulletinView } from '../../../shared/schemas/bulletin.ts'
import type { BulletinDraft, BulletinView } from '../../../shared/schemas/bulletin.ts'
import { useAttempt } from '../../composables/useAttempt.ts'
import { useBulletins } from '../../stores/bulletins.ts'
import { differingFields } from './bulletinWords.ts'
import { draftOf, formOf } from './draftForm.ts'

const pauseMs = 900

const emptyDraft: BulletinDraft = {
  ...{ marker: 'information', audience: '', headline: '', meaning: '', validFrom: null, validUntil: null },
  ...{ nextIssueAt: null, listIds: [], chosen: [], replacesId: null, isExercise: false },
}

const storedDraft = (key: string): BulletinDraft | null => {
  try {
    return bulletinDraft.safeParse(JSON.parse(sessionStorage.getItem(key) ?? 'null')).data ?? null
  } catch {
    return null
  }
}

export function useKeptDraft(opened: BulletinView, newest: () => BulletinView | undefined) {
  const bulletins = useBulletins()
  const { attempt, busy, fault, fieldFaults, current } = useAttempt()
  const key = `offing.bulletin.${opened.id}`
  /** What the form was made from and is compared with. */
  const base = shallowRef(opened)
  const baseDraft = computed(() => base.value.draft ?? emptyDraft)
  const form = ref(formOf(storedDraft(key) ?? opened.draft ?? emptyDraft))
  const changes = computed(() => differingFields(baseDraft.value, draftOf(form.value)))
  /** Somebody else's, kept meanwhile; null: nobody was quicker. */
  const theirs = shallowRef<BulletinView | null>(null)
  let pause: ReturnType<typeof setTimeout> | undefined

  async function keep(freezeAgain = false): Promise<boolean> {
    clearTimeout(pause)
    if (theirs.value || base.value.status !== 'draft') return false
    if (!freezeAgain && changes.value.length === 0) return true
    const done = await attempt(async () => {
      base.value = await bulletins.change(base.value, draftOf(form.value), freezeAgain)
    })
    if (done) {
      if (changes.value.length === 0) sessionStorage.removeItem(key)
      else later()
      return done
    }
    const other = bulletinView.safeParse(current.value)
    if (other.success) theirs.value = bulletins.apply(other.data)
    return false
  }
  function later(): void {
    clearTimeout(pause)
    pause = setTimeout(() => void (busy.value ? later() : keep()), pauseMs)
  }

  function take(view: BulletinView): void {
    base.value = view
    theirs.value = null
    form.value = formOf(view.draft ?? emptyDraft)
    sessionStorage.removeItem(key)
  }
  /** Mine over theirs, on purpose. */
  function overwrite(): Promise<boolean> {
    if (theirs.value) base.value = theirs.value
    theirs.value = null
    return keep()
  }

  watch(
    form,
    () => {
      if (changes.value.length === 0) return
      sessionStorage.setItem(key, JSON.stringify(draftOf(form.value)))
      later()
    },
    { deep: true, immediate: true },
  )
  // Somebody else kept it: taken over where nothing was typed here, else shown beside.
  watch(newest, (view) => {
    if (!view || view.version <= base.value.version || busy.value) return
    if (changes.value.length === 0) take(view)
    else theirs.value = view
  })
  onBeforeUnmount(() => void keep())

  return { base, form, changes, theirs, keep, take, overwrite, busy, fault, fieldFaults }
}
