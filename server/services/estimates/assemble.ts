/** One window ready for the estimator: readings, the versions that count for it, level of the water and pressure of the air. */
import type { Parts } from '../../config/parts.ts'
import { arrayWindowOf, surgeSpanMs } from './arrayWindow.ts'
import type { WindowQuestion } from './arrayWindow.ts'
import { airPressureAt, tideLevelAt } from './levels.ts'
import type { SettingsVersion } from './timeline.ts'

/** Where the readings begin that a window and its surge need, ms. */
export const readingsFrom = (windowEndsAt: number, { content }: SettingsVersion): number =>
  windowEndsAt - Math.max(content.windowSeconds * 1000, surgeSpanMs)

export async function assembleWindow(
  parts: Pick<Parts, 'sequelize'>,
  stationId: number,
  question: Omit<WindowQuestion, 'tideLevel' | 'airPressure'>,
) {
  const [tideLevel, airPressure] = await Promise.all([
    tideLevelAt(parts, stationId, question.windowEndsAt),
    airPressureAt(parts, stationId, question.windowEndsAt),
  ])
  return arrayWindowOf({ ...question, tideLevel, airPressure })
}
