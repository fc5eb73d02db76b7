/** Where things stand on the rolling ruler: 9 h back, 3 h ahead, now at three quarters. Pure: times and width in, x out. */
import { clockUtc } from '../../../shared/times.ts'
import type { AlertView } from '../../../shared/schemas/alert.ts'
import type { Priority } from '../../../shared/schemas/limit.ts'
import type { SunTimes } from '../../../shared/sunTimes.ts'

export const hoursBack = 9
export const hoursAhead = 3
const hourMs = 3_600_000

export interface RulerTick {
  x: number
  height: number
  /** Named every three hours. */
  label: string | null
}

export interface RulerEvent {
  x: number
  labelX: number
  anchor: 'start' | 'middle' | 'end'
  words: string
}

export const rulerX = (ms: number, nowMs: number, width: number): number =>
  2 + ((ms - (nowMs - hoursBack * hourMs)) / ((hoursBack + hoursAhead) * hourMs)) * (width - 4)

export function rulerTicks(nowMs: number, width: number): RulerTick[] {
  const half = hourMs / 2
  const first = Math.ceil((nowMs - hoursBack * hourMs) / half) * half
  const ticks: RulerTick[] = []
  let named = 0
  for (let ms = first; ms <= nowMs + hoursAhead * hourMs; ms += half) {
    const hour = (ms / hourMs) % 24
    const x = rulerX(ms, nowMs, width)
    const isNamed = hour % 3 === 0 && x < width - 24
    const name = String(hour).padStart(2, '0')
    ticks.push({
      x,
      height: hour % 3 === 0 ? 14 : hour % 1 === 0 ? 8 : 4,
      label: isNamed ? (named++ === 0 ? `${name} UTC` : name) : null,
    })
  }
  return ticks
}

/** Room that a label needs on each side, px. */
const halfLabel = 42

/** Sunrise and sunset within the ruler, their labels kept clear of the word "now" and of the edges. */
export function rulerSun(sun: readonly SunTimes[], nowMs: number, width: number): RulerEvent[] {
  const nowX = rulerX(nowMs, nowMs, width)
  return sun
    .flatMap(({ riseMs, setMs }) => [
      { ms: riseMs, name: 'sunrise' },
      { ms: setMs, name: 'sunset' },
    ])
    .filter(({ ms }) => ms > nowMs - hoursBack * hourMs && ms < nowMs + hoursAhead * hourMs)
    .map(({ ms, name }) => {
      const x = rulerX(ms, nowMs, width)
      const words = `${name} ${clockUtc(ms)}`
      if (x < halfLabel) return { x, labelX: Math.max(2, x), anchor: 'start', words }
      if (x > width - halfLabel) return { x, labelX: width - 2, anchor: 'end', words }
      if (x > nowX && x < nowX + halfLabel + 10) return { x, labelX: nowX + 10, anchor: 'start', words }
      if (x <= nowX && x > nowX - halfLabel - 38) return { x, labelX: nowX - 40, anchor: 'end', words }
      return { x, labelX: x, anchor: 'middle', words }
    })
}

export interface RulerAlert {
  id: number
  priority: Priority
  x: number
  /** Where its strokes stand, one to four. */
  strokes: number[]
}

const strokeCount: Record<Priority, number> = { low: 1, medium: 2, high: 3, urgent: 4 }

/** Alerts raised within the ruler. */
export function rulerAlerts(
  alerts: readonly Pick<AlertView, 'id' | 'priority' | 'raisedAt'>[],
  nowMs: number,
  width: number,
): RulerAlert[] {
  return alerts
    .filter(({ raisedAt }) => Date.parse(raisedAt) > nowMs - hoursBack * hourMs)
    .map(({ id, priority, raisedAt }) => {
      const x = rulerX(Date.parse(raisedAt), nowMs, width)
      const count = strokeCount[priority]
      return { id, priority, x, strokes: Array.from({ length: count }, (_, n) => x - (count - 1) * 2 + n * 4) }
    })
}
