import { computed, onBeforeUnmount, ref, watch } from 'vue'
import type { ImportView, UploadLayout, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import { useJobs } from '../stores/jobs.ts'
import { useStationSetUpUploads } from '../stores/stationSetUpUploads.ts'
import type { UploadKind } from '../stores/stationSetUpUploads.ts'
import { useAttempt } from './useAttempt.ts'

/** Files of one kind for one station: brought in with progress, checked, stored, undone. */
export function useUploads(stationId: number, kind: UploadKind) {
  const store = useStationSetUpUploads()
  const jobs = useJobs()
  const reading = useAttempt()
  /** Apart from what is done with files that are here: one may be on its way meanwhile. */
  const bringing = useAttempt()
  const acting = useAttempt()
  /** Share of the file that has left this computer; null: nothing is on its way. */
  const sentShare = ref<number | null>(null)
  const sending = ref('')
  let stop: AbortController | null = null

  const uploads = computed(() => store.uploadsOf(stationId, kind))
  const imports = computed(() => store.importsOf(stationId).filter((one) => one.kind === kind))
  const jobOf = (upload: UploadView) => jobs.all.find((job) => job.id === upload.jobId) ?? null
  const isAtWork = ({ state }: UploadView): boolean => state === 'checking' || state === 'storing'

  const open = (): Promise<boolean> => reading.attempt(() => store.read(stationId))

  async function bring(file: File): Promise<void> {
    if (sentShare.value !== null) return
    stop = new AbortController()
    const { signal } = stop
    sentShare.value = 0
    sending.value = file.name
    const done = await bringing.attempt(() =>
      store.send(stationId, kind, file, (share) => (sentShare.value = share), signal),
    )
    if (!done && signal.aborted) bringing.fault.value = `${file.name} was stopped on its way; nothing of it is kept.`
    sentShare.value = null
  }
  const halt = (): void => stop?.abort()
  const check = (id: number, layout: UploadLayout): Promise<boolean> => acting.attempt(() => store.check(id, layout))
  const keep = (id: number, layout: UploadLayout): Promise<boolean> => acting.attempt(() => store.store(id, layout))
  const discard = (upload: UploadView): Promise<boolean> => acting.attempt(() => store.discard(upload))
  const cancel = (upload: UploadView): Promise<boolean> =>
    acting.attempt(async () => {
      if (upload.jobId !== null) await store.cancel(upload.jobId)
      await store.refresh(upload.id)
    })
  const undo = (one: ImportView, reason: string): Promise<void> => store.undo(one, reason)

  /** A job's end changes its upload; it is asked for, and again while work goes on, because news may be lost. */
  async function follow(): Promise<void> {
    const atWork = uploads.value.filter(isAtWork)
    if (atWork.length === 0) return
    try {
      const views = await Promise.all(atWork.map(({ id }) => store.refresh(id)))
      if (views.some((view) => view.state === 'stored')) await store.read(stationId)
    } catch {
      // Asked again at the next turn.
    }
  }
  watch(
    () => uploads.value.map((upload) => jobOf(upload)?.status).join(),
    () => void follow(),
  )
  const timer = setInterval(() => void follow(), 1_500)
  onBeforeUnmount(() => {
    clearInterval(timer)
    halt()
  })

  return {
    ...{ reading, bringing, acting, sentShare, sending, uploads, imports, jobOf, isAtWork },
    ...{ open, bring, halt, check, keep, discard, cancel, undo },
  }
}
