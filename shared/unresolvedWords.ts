/** Why a station shows no vector, in words for the people who watch. */
import type { UnresolvedReason } from './schemas/estimate.ts'

const words: Record<UnresolvedReason, { title: string; sentence: string }> = {
  'too-few-sensors': {
    title: 'Too few sensors',
    sentence: 'Fewer than three sensors gave usable readings; a direction needs three.',
  },
  'collinear-array': {
    title: 'Sensors in one line',
    sentence: 'The usable sensors stand in one line, so that two directions fit equally well.',
  },
  'too-little-data': {
    title: 'Too little data',
    sentence: 'Too much of the record is missing for a figure.',
  },
  'no-resolvable-wave': {
    title: 'No resolvable wave',
    sentence: 'No train of waves stands out enough to give a direction.',
  },
  ambiguous: {
    title: 'Direction ambiguous',
    sentence: 'Two directions fit the lags nearly equally well. The one before is held until one of them clearly fits.',
  },
  'geometry-doubtful': {
    title: 'Frozen: geometry doubtful',
    sentence: 'Parts of the array disagree: a position or a clock does not fit. No vector until a person has decided.',
  },
  'standing-sea': {
    title: 'Standing or reflected sea',
    sentence: 'Waves of one period run against each other with locked phases, as before a wall: no single vector.',
  },
  'surf-zone': {
    title: 'Surf zone over the array',
    sentence: 'The waves break over the array (height above 0.6 of the depth): no single vector.',
  },
  clock: {
    title: 'Clock too far off',
    sentence: 'The clock of the station differs too much from the clock of the server for a live figure.',
  },
  'not-computed': {
    title: 'Not computed',
    sentence: 'The computation of this window failed on the server; its readings are kept.',
  },
}

/** Title and one sentence; a refusal without a reason is told as such. */
export const unresolvedWords = (reason: UnresolvedReason | null): { title: string; sentence: string } =>
  reason === null ? { title: 'No vector', sentence: 'The window gave no vector and no reason for it.' } : words[reason]
