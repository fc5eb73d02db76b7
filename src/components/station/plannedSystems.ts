/** Systems and sensors of an estimate as the drawings want them. */
import type { EstimateResult, WaveSystem } from '../../../shared/schemas/estimate.ts'
import type { DeploymentView } from '../../../shared/schemas/station.ts'
import { systemSign, systemTitle } from '../../../shared/waveSystemNames.ts'
import type { PlannedSensor } from '../drawings/geometry/crestPlanLayout.ts'
import type { RecordedHeading } from '../drawings/geometry/recordLayout.ts'

/** Signs and titles are those the system has among all systems of the estimate. */
export const plannedSystems = (shown: readonly WaveSystem[], all: readonly WaveSystem[]) =>
  shown.map((system) => ({
    key: system.key,
    title: systemTitle(system, all),
    sign: systemSign(system, all),
    toward: system.toward,
    from: system.from,
    speed: system.speed,
    period: system.peakPeriod,
    headingSd: system.headingSd,
    speedSd: system.speedSd,
  }))

/** Where no verdict is kept, a deployed sensor counts as used. */
export const plannedSensors = (deployment: DeploymentView | null, detail: EstimateResult | null): PlannedSensor[] =>
  (deployment?.sensors ?? []).map((sensor) => ({
    name: sensor.letter,
    east: sensor.east,
    north: sensor.north,
    isUsed: detail?.sensors.find((verdict) => verdict.id === sensor.letter)?.used ?? true,
  }))

/** Along which heading the record section is ordered: slowness as the lags say. */
export function recordedHeading(system: WaveSystem | undefined): RecordedHeading | null {
  if (!system) return null
  const slowness = Math.hypot(system.slownessEast, system.slownessNorth)
  return slowness > 0 ? { toward: system.toward, slowness, period: system.peakPeriod } : null
}
