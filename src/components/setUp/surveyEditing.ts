/** The survey under the hands of an administrator: moved, typed, added to, taken over from a file; all of it undone. */
import { computed, ref, shallowRef, watch } from 'vue'
import type { GridPosition } from '../../../shared/geodesy.ts'
import type { DeploymentDraftContent, DraftSensor, PlacedSensor } from '../../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import { useUndo } from '../../composables/useUndo.ts'
import { emptySurvey, moveTo, nextRow, rowOf, surveyFormOf, surveyOf } from './surveyForm.ts'
import type { SensorRow, SurveyForm } from './surveyForm.ts'

interface Placing {
  placed: PlacedSensor[]
  faults: { index: number; reason: string }[]
}

/** `place`: every sensor on the station's grid, with the reasons where one cannot be placed. */
export function surveyEditing(place: (content: DeploymentDraftContent) => Placing) {
  const form = useUndo<SurveyForm>(emptySurvey())
  /** As it was filled or saved. */
  const saved = ref(JSON.stringify(form.now.value))
  const selected = ref<string | null>(null)
  const result = computed(() => surveyOf(form.now.value))
  const faults = computed(() => (form.now.value.sensors.length === 0 ? {} : (result.value.faults ?? {})))
  const placing = computed(() => (result.value.content ? place(result.value.content) : null))
  const placed = computed(() => placing.value?.placed ?? [])
  const isChanged = computed(() => JSON.stringify(form.now.value) !== saved.value)

  /** On the plan even while another cell cannot be read: the last place of each. */
  const lastPlaces = shallowRef(new Map<string, GridPosition>())
  watch(
    placed,
    (sensors) => {
      const keys = new Map(form.now.value.sensors.map((row) => [row.letter.trim(), row.key]))
      const next = new Map(lastPlaces.value)
      for (const { letter, east, north } of sensors) next.set(keys.get(letter) ?? letter, { east, north })
      lastPlaces.value = next
    },
    { immediate: true },
  )
  const drawn = computed(() =>
    form.now.value.sensors.flatMap(({ key, letter }) => {
      const at = lastPlaces.value.get(key)
      return at ? [{ key, name: letter, ...at }] : []
    }),
  )
  const chosen = computed(() => {
    const index = form.now.value.sensors.findIndex((row) => row.key === selected.value)
    const row = form.now.value.sensors[index]
    const others = form.now.value.sensors.filter((one) => one.key !== row?.key).map((one) => one.letter)
    return row ? { row, index, others } : null
  })
  const whyUnchecked = computed(() => {
    if (form.now.value.sensors.length === 0) return 'There is no sensor yet.'
    const [fault] = placing.value?.faults ?? []
    if (fault) return `${form.now.value.sensors[fault.index]?.letter ?? 'A sensor'}: ${fault.reason}.`
    return result.value.content ? null : 'A figure of the survey cannot be read; it is marked.'
  })

  function keep(): void {
    saved.value = JSON.stringify(form.now.value)
  }
  function fill(content: DeploymentDraftContent | null): void {
    form.begin(content ? surveyFormOf(content) : emptySurvey())
    keep()
  }
  const withSensors = (sensors: SensorRow[]): SurveyForm => ({ ...form.now.value, sensors })
  const withRow = (key: string, to: (row: SensorRow) => SensorRow): SurveyForm =>
    withSensors(form.now.value.sensors.map((row) => (row.key === key ? to(row) : row)))
  const move = (key: string, to: GridPosition, gesture: string): void =>
    form.change(
      withRow(key, (row) => moveTo(row, to)),
      gesture,
    )
  function change(key: string, field: keyof SensorRow, value: string): void {
    const at = lastPlaces.value.get(key)
    const isGridNow = field === 'by' && value === 'grid' && at !== undefined
    const next = withRow(key, (row) => (isGridNow ? moveTo(row, at) : { ...row, [field]: value }))
    form.change(next, `${key} ${field}`)
  }
  function add(code: string): void {
    const row = nextRow(form.now.value, code, { east: 0, north: 0 })
    form.change(withSensors([...form.now.value.sensors, row]))
    selected.value = row.key
  }
  function remove(key: string): void {
    form.change(withSensors(form.now.value.sensors.filter((row) => row.key !== key)))
    selected.value = null
  }
  function takeOver(sensors: DraftSensor[]): void {
    form.change(withSensors(sensors.map((sensor, index) => rowOf(sensor, `s${index + 1}`))))
    selected.value = null
  }

  return {
    ...{ form, selected, result, faults, placed, isChanged, drawn, chosen, whyUnchecked },
    ...{ fill, keep, move, change, add, remove, takeOver },
  }
}
