/** What is said of a station that shows no vector: a title and a sentence, whatever the state. */
import type { LivePicture } from '../../../shared/livePicture.ts'
import type { StationView } from '../../../shared/schemas/station.ts'
import { unresolvedWords } from '../../../shared/unresolvedWords.ts'
import { age } from '../../../shared/units.ts'
import { lastGoodWords } from './lastGoodWords.ts'

export interface NoVectorWords {
  title: string
  sentence: string
}

type WithoutVector = Exclude<LivePicture, { kind: 'live' }>

export function noVectorWords(station: StationView, picture: WithoutVector, nowMs: number): NoVectorWords {
  const windowMinutes = Math.round(station.windowSeconds / 60)
  switch (picture.kind) {
    case 'loading':
      return {
        title: `Record: ${Math.floor(picture.share * windowMinutes)} of ${windowMinutes} min so far`,
        sentence: 'A figure needs four fifths of it.',
      }
    case 'empty':
      return { title: 'Nothing received yet', sentence: 'No reading of this station has ever reached the server.' }
    case 'stale':
      return {
        title: 'Withdrawn from the live picture',
        sentence: `${lastGoodWords(picture.lastGood, nowMs)} Limit ${age(station.staleAfterSeconds)}.`,
      }
    case 'failed':
      return {
        title: 'Failed, figures withdrawn',
        sentence: `A quality test failed; the station page names it. ${lastGoodWords(picture.lastGood, nowMs)}`,
      }
    case 'frozen':
    case 'unresolved':
      return unresolvedWords(picture.estimate.reason)
  }
}
