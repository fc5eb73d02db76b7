/** Which form of the mark a state has. */
import type { AlertState } from '../../../shared/schemas/limit.ts'

/** Filled: active, not acknowledged. Outline: acknowledged. Open corners: cleared. On its shelf. Struck: not in use. */
export type MarkForm = 'filled' | 'outline' | 'open' | 'shelved' | 'struck'

const forms: Record<AlertState, MarkForm> = {
  unacknowledgedActive: 'filled',
  acknowledgedActive: 'outline',
  returnedUnacknowledged: 'open',
  latchedUnacknowledged: 'open',
  latchedAcknowledged: 'open',
  shelved: 'shelved',
  suppressed: 'struck',
  outOfService: 'struck',
  normal: 'outline',
}

export const markOf = (state: AlertState): MarkForm => forms[state]
