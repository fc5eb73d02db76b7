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
  // A window's mean is that of its middle, and so is the level that stands in for it.
  const middle = question.windowEndsAt - question.settings.content.windowSeconds * 500
  const [tideLevel, airPressure] = await Promise.all([
    tideLevelAt(parts, stationId, middle),
    airPressureAt(parts, stationId, middle),
  ])
  return arrayWindowOf({ ...question, tideLevel, airPressure })
}
