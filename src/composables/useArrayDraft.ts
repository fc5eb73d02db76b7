import { computed, ref, shallowRef } from 'vue'
import type { Ref } from 'vue'
import { placeSensors } from '../../shared/arrayDesign/placeSensors.ts'
import { deploymentDraftView } from '../../shared/schemas/stationSetUpDeployments.ts'
import type {
  DeploymentDraftContent,
  DeploymentOrder,
  DeploymentDraftView,
} from '../../shared/schemas/stationSetUpDeployments.ts'
import { useStationSetUp } from '../stores/stationSetUp.ts'
import { useStationSetUpDeployments } from '../stores/stationSetUpDeployments.ts'
import { useAttempt } from './useAttempt.ts'
import { useSaving } from './useSaving.ts'

/**
 * The draft of a station's next deployment at the server, or of the correction of a past one: found or begun, saved
 * with its version, put in force. What is being typed belongs to the page.
 */
export function useArrayDraft(stationId: number, correctsId: Readonly<Ref<number | null>>) {
  const records = useStationSetUp()
  const deployments = useStationSetUpDeployments()
  const reading = useAttempt()
  const saving = useSaving(deploymentDraftView)
  const isReady = ref(false)
  /** As the form was last filled from or saved to; null while nothing was saved. */
  const draft = shallowRef<DeploymentDraftView | null>(null)

  const record = computed(() => records.byId(stationId))
  const versions = computed(() => deployments.of(stationId))
  const inForce = computed(() => deployments.inForce(stationId))
  /** What is corrected, or what is in force: the next one begins as its copy. */
  const ground = computed(() =>
    correctsId.value === null ? inForce.value : (versions.value.find((one) => one.id === correctsId.value) ?? null),
  )
  const next = computed(() => Math.max(0, ...versions.value.map((one) => one.number)) + 1)
  const number = computed(() =>
    correctsId.value === null ? (draft.value?.number ?? next.value) : (ground.value?.number ?? 0),
  )

  const open = (): Promise<boolean> =>
    reading.attempt(async () => {
      // Nothing may be typed into what is about to be filled anew.
      isReady.value = false
      await Promise.all([records.open(stationId), deployments.read(stationId)])
      draft.value = deployments.draftOf(stationId, correctsId.value)
      isReady.value = true
    })

  async function keep(content: DeploymentDraftContent): Promise<DeploymentDraftView> {
    draft.value = draft.value
      ? await deployments.save(draft.value, content)
      : await deployments.begin(stationId, {
          basedOnId: ground.value?.id ?? null,
          correctsId: correctsId.value,
          content,
        })
    return draft.value
  }
  const save = (content: DeploymentDraftContent): Promise<boolean> => saving.save(() => keep(content))
  const putInForce = (content: DeploymentDraftContent, order: DeploymentOrder): Promise<boolean> =>
    saving.save(async () => {
      await deployments.putInForce(await keep(content), order)
      draft.value = null
      await records.open(stationId)
    })
  const discard = (): Promise<boolean> =>
    saving.save(async () => {
      if (draft.value) await deployments.discard(draft.value)
      draft.value = null
    })

  /** What the other editor saved becomes the ground. */
  function standOnTheirs(): DeploymentDraftView | null {
    const other = saving.other.value
    if (other) draft.value = deployments.apply(other)
    saving.dismiss()
    return other
  }
  /** Every sensor on the grid, with the reasons where one cannot be placed. */
  const place = (content: DeploymentDraftContent): ReturnType<typeof placeSensors> =>
    placeSensors(record.value ?? { latitude: 0, longitude: 0 }, content.sensors)

  return {
    ...{ reading, saving, isReady, draft, record, versions, inForce, ground, number },
    ...{ open, save, putInForce, discard, standOnTheirs, place },
  }
}
