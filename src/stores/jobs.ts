/** Long work and its progress, such as computing the demonstration's past. */
import { defineStore } from 'pinia'
import { computed, shallowReactive } from 'vue'
import { longJobView } from '../../shared/schemas/longJob.ts'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import { readJobs } from '../api/jobs.ts'
import { useLive } from './live.ts'

export const useJobs = defineStore('jobs', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, LongJobView>())
  const all = computed(() => [...held.values()].sort((a, b) => a.id - b.id))
  const unfinished = computed(() => all.value.filter((job) => job.status === 'queued' || job.status === 'running'))
  const failed = computed(() => all.value.filter((job) => job.status === 'failed'))

  function apply(job: LongJobView): void {
    const before = held.get(job.id)
    if (!before || Date.parse(job.updatedAt) >= Date.parse(before.updatedAt)) held.set(job.id, job)
  }

  let leaveRoom: (() => void) | null = null
  function watchAll(): void {
    leaveRoom ??= live.join('system', {
      async hydrate() {
        for (const job of await readJobs()) apply(job)
      },
      apply(event) {
        const parsed = longJobView.safeParse(event.body)
        if (event.kind === 'job' && parsed.success) apply(parsed.data)
      },
    })
  }
  function leave(): void {
    leaveRoom?.()
    leaveRoom = null
  }

  return { all, unfinished, failed, apply, watchAll, leave }
})
