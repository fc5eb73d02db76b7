/** Limits and their states. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import type { ReasonAndConsent } from '../../shared/schemas/alert.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import type { LimitChange, LimitDraft, LimitSubject, LimitVersionView, LimitView } from '../../shared/schemas/limit.ts'
import * as api from '../api/limits.ts'
import { useLive } from './live.ts'

export type LimitNews =
  | { kind: 'limits'; body: LimitView[] }
  | { kind: 'limit'; body: LimitView }
  | { kind: 'history'; id: number; body: LimitVersionView[] }

/** A change raises the version; a new judgement of the same version has a later moment or state. */
function isOlder(next: LimitView, held: LimitView): boolean {
  if (next.version !== held.version) return next.version < held.version
  const judged = (view: LimitView): number => (view.lastJudgedAt ? Date.parse(view.lastJudgedAt) : 0)
  return judged(next) < judged(held) && Date.parse(next.stateSince) <= Date.parse(held.stateSince)
}

export const useLimits = defineStore('limits', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, LimitView>())
  const histories = shallowReactive(new Map<number, LimitVersionView[]>())
  const loaded = ref(false)

  const all = computed(() =>
    [...held.values()]
      .filter((limit) => limit.retiredAt === null)
      .sort((a, b) => a.subject.name.localeCompare(b.subject.name) || a.title.localeCompare(b.title) || a.id - b.id),
  )
  const byId = (id: number): LimitView | undefined => held.get(id)
  /** All versions of a limit that was opened, newest first. */
  const history = (id: number): LimitVersionView[] => histories.get(id) ?? []

  function apply(news: LimitNews): void {
    if (news.kind === 'history') return void histories.set(news.id, news.body)
    if (news.kind === 'limits') {
      const listed = new Set(news.body.map((limit) => limit.id))
      for (const id of held.keys()) if (!listed.has(id)) held.delete(id)
      for (const limit of news.body) apply({ kind: 'limit', body: limit })
      loaded.value = true
      return
    }
    const before = held.get(news.body.id)
    if (!before || !isOlder(news.body, before)) held.set(news.body.id, news.body)
  }

  let leaveRoom: (() => void) | null = null
  /** For as long as a page shows limits; the answer leaves. */
  function watchAll(): () => void {
    leaveRoom ??= live.join('limits', {
      async hydrate() {
        apply({ kind: 'limits', body: await api.readLimits() })
      },
      apply(event) {
        const parsed = limitView.safeParse(event.body)
        if (event.kind === 'limit' && parsed.success) apply({ kind: 'limit', body: parsed.data })
      },
    })
    return () => {
      leaveRoom?.()
      leaveRoom = null
    }
  }

  async function open(id: number): Promise<void> {
    const { versions, ...limit } = await api.readLimit(id)
    apply({ kind: 'limit', body: limit })
    apply({ kind: 'history', id, body: [...versions].sort((a, b) => b.number - a.number) })
  }

  async function create(draft: LimitDraft): Promise<number> {
    const limit = await api.createLimit(draft)
    apply({ kind: 'limit', body: limit })
    return limit.id
  }

  async function change(id: number, version: number, next: LimitChange): Promise<void> {
    apply({ kind: 'limit', body: await api.changeLimit(id, version, next) })
    await open(id)
  }

  async function retire(id: number, version: number, order: ReasonAndConsent): Promise<void> {
    await api.retireLimit(id, version, order)
    held.delete(id)
  }

  const subjects = shallowRef<LimitSubject[]>([])
  async function readSubjects(): Promise<void> {
    subjects.value = await api.readSubjects()
  }

  return {
    loaded,
    all,
    subjects,
    readSubjects,
    byId,
    history,
    apply,
    watchAll,
    open,
    create,
    change,
    retire,
    backTest: api.backTest,
  }
})
