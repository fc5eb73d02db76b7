import type { SoundState } from '../../stores/sound.ts'
import { clockUtcSeconds } from '../../../shared/times.ts'

/** `On`, `Off`, `Blocked`, `Silent to 14:34:07`. */
export function soundWords(state: SoundState, silentUntilMs: number, nowMs: number): string {
  if (state === 'on' && nowMs < silentUntilMs) return `Silent to ${clockUtcSeconds(silentUntilMs)}`
  return { on: 'On', off: 'Off', blocked: 'Blocked' }[state]
}
