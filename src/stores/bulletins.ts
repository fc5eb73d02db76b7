/** Drafts and issued bulletins as far as they were read. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import { z } from 'zod'
import { bulletinView } from '../../shared/schemas/bulletin.ts'
import type { BulletinDraft, BulletinView, PublicBulletin } from '../../shared/schemas/bulletin.ts'
import * as api from '../api/bulletins.ts'
import type { Consented } from '../api/bulletins.ts'
import { ProblemError } from '../api/problem.ts'
import { useLive } from './live.ts'

const goneBody = z.object({ id: z.number().int() })

export const useBulletins = defineStore('bulletins', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, BulletinView>())
  const loaded = ref(false)
  /** Id before which there are older ones; null: all are here. */
  const next = ref<number | null>(null)
  const open = shallowRef<{ portName: string; bulletins: PublicBulletin[] } | null>(null)

  const newestFirst = computed(() => [...held.values()].sort((one, other) => other.id - one.id))
  const drafts = computed(() => newestFirst.value.filter(({ status }) => status === 'draft'))
  const issues = computed(() => newestFirst.value.filter(({ status }) => status !== 'draft'))
  const byId = (id: number): BulletinView | undefined => held.get(id)
  const chainOf = (view: BulletinView): BulletinView[] => issues.value.filter((one) => one.chainId === view.chainId)

  function apply(view: BulletinView): BulletinView {
    const before = held.get(view.id)
    if (!before || view.version >= before.version) held.set(view.id, view)
    return view
  }

  async function read(): Promise<void> {
    const answer = await api.readBulletins()
    const listed = new Set(answer.drafts.map(({ id }) => id))
    for (const view of drafts.value) if (!listed.has(view.id)) held.delete(view.id)
    for (const view of [...answer.drafts, ...answer.bulletins]) apply(view)
    next.value = answer.next
    loaded.value = true
  }
  async function readOlder(): Promise<void> {
    if (next.value === null) return
    const answer = await api.readBulletins(next.value)
    for (const view of answer.bulletins) apply(view)
    next.value = answer.next
  }

  let leaveRoom: (() => void) | null = null
  /** For as long as a page shows bulletins; the answer leaves. */
  function watchAll(): () => void {
    leaveRoom ??= live.join('bulletins', {
      hydrate: read,
      apply(event) {
        const view = bulletinView.safeParse(event.body)
        const gone = goneBody.safeParse(event.body)
        if (event.kind === 'bulletin' && view.success) apply(view.data)
        else if (event.kind === 'bulletinGone' && gone.success) held.delete(gone.data.id)
      },
    })
    return () => {
      leaveRoom?.()
      leaveRoom = null
    }
  }

  const readOne = async (id: number): Promise<void> => void apply(await api.readBulletin(id))
  const add = async (draft: BulletinDraft): Promise<BulletinView> => apply(await api.addBulletin(draft))
  const change = async (view: BulletinView, draft: BulletinDraft, freezeAgain: boolean): Promise<BulletinView> =>
    apply(await api.changeBulletin(view.id, view.version, { draft, freezeAgain }))
  const issue = async (view: BulletinView, consented: Consented): Promise<BulletinView> =>
    apply(await api.issueBulletin(view.id, view.version, consented))
  const cancel = async (view: BulletinView, reason: string): Promise<BulletinView> =>
    apply(await api.cancelBulletin(view.id, view.version, reason))
  async function discard(view: BulletinView): Promise<void> {
    await api.discardBulletin(view.id, view.version)
    held.delete(view.id)
  }
  /** `off`: the office keeps its bulletins to itself. */
  async function readOpen(): Promise<'off' | 'on'> {
    try {
      open.value = await api.readPublicBulletins()
      return 'on'
    } catch (error) {
      if (!(error instanceof ProblemError) || error.problem.status !== 404) throw error
      open.value = null
      return 'off'
    }
  }

  return {
    ...{ loaded, next, drafts, issues, open, byId, chainOf, apply, readOlder, watchAll, readOne, add, change, issue },
    ...{ cancel, discard, readOpen, proof: api.proofBulletin, readFigures: api.readBulletinFigures },
  }
})
