import { handOverSheet, watchNow } from '../../shared/schemas/watch.ts'
import type { HandOverSheet, WatchNow } from '../../shared/schemas/watch.ts'
import type { SecondPerson } from '../../shared/schemas/consent.ts'
import { request } from './request.ts'

export const readWatchNow = (): Promise<WatchNow> => request('GET', '/api/watches/now', watchNow)

export const readSheet = (): Promise<HandOverSheet> => request('GET', '/api/handOvers/sheet', handOverSheet)

export const startWatch = (name: string): Promise<WatchNow> => request('POST', '/api/watches', watchNow, { name })

export const endWatch = (reason: string): Promise<WatchNow> => request('POST', '/api/watches/end', watchNow, { reason })

export const keepNotes = (notes: Record<string, string>, expected: string): Promise<HandOverSheet> =>
  request('PUT', '/api/handOvers/notes', handOverSheet, { notes, expected })

export interface Signing {
  relief: SecondPerson
  name: string
  sound: 'on' | 'off' | 'blocked' | 'not known'
}

export const signHandOver = (signing: Signing): Promise<WatchNow> =>
  request('POST', '/api/handOvers', watchNow, signing)

export const takeOver = (reason: string, name: string): Promise<WatchNow> =>
  request('POST', '/api/handOvers/takeOver', watchNow, { reason, name })

export const writeOwed = (handOverId: number, notes: Record<string, string>): Promise<WatchNow> =>
  request('POST', `/api/handOvers/${handOverId}/owed`, watchNow, { notes })
