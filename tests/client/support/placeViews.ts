/** Places of the demonstration with outlooks worked out by the program's own composition, as the server would give them. */
import { usualPlaceCautions } from '../../../shared/places/usualWords.ts'
import { placeDraftsOf } from '../../../shared/demonstration/places.ts'
import type { FeedEstimate, FeedStation } from '../../../shared/places/feed.ts'
import { outlookOf } from '../../../shared/places/outlook.ts'
import type { PlaceLimit, PlaceView } from '../../../shared/schemas/place.ts'
import type { OutlookView, TideNow } from '../../../shared/schemas/placeOutlook.ts'
import { quantitiesOfKind } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import { waveSystem } from '../../support/waveSystem.ts'

export const placesAt = Date.parse('2026-11-12T14:30:00Z')
const stationIds: Record<string, number> = { OL: 1, FW: 2, PB: 3 }
const stationNames: Record<number, string> = { 1: 'Outer Ledge', 2: 'Fairway', 3: 'Pennow Bar' }

export const seaEstimate = (changes: Partial<FeedEstimate> = {}): FeedEstimate => ({
  ...{ windowStartsAt: placesAt - 1_200_000, windowEndsAt: placesAt, revision: 1, resolved: true, reason: null },
  ...{ qualityFlag: 1, significantWaveHeight: 2.1, significantWaveHeightSd: 0.1, peakPeriod: 12.5, meanPeriod: 8.6 },
  ...{ energyPeriod: 10.8, surgeHeight: 0.09, waterDepth: 11.6, directionalSpectrum: null },
  systems: [
    waveSystem({ height: 1.9, period: 12.5, from: 241 }, 1),
    waveSystem({ height: 0.9, period: 5.6, from: 288, name: 'wind sea', spread: 35 }, 2),
  ],
  ...changes,
})

const tide: TideNow = {
  ...{ level: 0.3, sd: 0.1, source: 'predicted', stationName: 'Fairway', stage: 'falling' },
  highWater: { at: '2026-11-12T23:10:00.000Z', level: 0.5 },
  lowWater: { at: '2026-11-12T17:05:00.000Z', level: -0.5 },
}

interface PlaceWanted {
  /** By station's code; null: it never sent. Those not named send the usual sea. */
  sea?: Record<string, FeedEstimate | null>
  limits?: Partial<PlaceLimit>[]
  changes?: Partial<PlaceView>
}

export function placeLimit(quantity: PlaceQuantityKey, changes: Partial<PlaceLimit> = {}): PlaceLimit {
  return {
    ...{ limitId: 1, quantity, title: 'Limit', words: 'above 1.00 m', priority: 'high', raise: 1, clear: 0.85 },
    ...{ onDelaySeconds: 600, offDelaySeconds: 1800, state: 'normal', isActive: false, notJudged: null },
    ...{ openAlertId: null, raisedAt: null, acknowledgedAt: null, shelvedUntil: null },
    ...changes,
  }
}

function outlookView(
  placeId: number,
  settings: PlaceSettingsContent,
  sea: Record<string, FeedEstimate | null>,
): OutlookView {
  const stations = settings.stationOrder.map(({ stationId }): FeedStation => {
    const code = Object.keys(stationIds).find((one) => stationIds[one] === stationId) ?? ''
    const estimate = code in sea ? sea[code] : seaEstimate()
    return { id: stationId, name: stationNames[stationId], staleAfterSeconds: 900, estimate }
  })
  const { content, feed } = outlookOf({ at: placesAt, settings, stations, tide })
  const ends = new Date(feed?.estimate.windowEndsAt ?? placesAt)
  return {
    ...content,
    ...{
      placeId,
      windowStartsAt: new Date(ends.getTime() - 1_200_000).toISOString(),
      windowEndsAt: ends.toISOString(),
    },
    ...{ revision: 1, computedAt: new Date(placesAt + 12_000).toISOString(), staleAfterSeconds: 900, settingsId: 7 },
    ...{ softwareVersion: 'test', isThinned: false },
    source: feed && {
      ...{ stationId: feed.station.id, name: feed.station.name, code: 'FW', estimateRevision: 1 },
      isSubstitute: feed.index > 0,
    },
    figures: content.figures.map((figure) => ({ ...figure, caution: usualPlaceCautions[figure.quantity] })),
    rip: content.rip && { ...content.rip, caution: usualPlaceCautions.rip },
    arrivals: content.arrivals.map((one) => ({ ...one, stationName: stationNames[one.stationId] })),
  }
}

/** By the code of the demonstration: EN, LA, B36, PS, OB. */
export function placeView(code: string, { sea = {}, limits = [], changes = {} }: PlaceWanted = {}): PlaceView {
  const drafts = placeDraftsOf(
    (station) => stationIds[station],
    () => null,
  )
  const id = drafts.findIndex((draft) => draft.code === code) + 1
  const draft = drafts[id - 1]
  if (!draft) throw new Error(`no place ${code}`)
  const { settings: content, reason, ...described } = draft
  const [lead] = quantitiesOfKind[content.kind]
  return {
    ...{ id, version: 3, kind: content.kind, ...described },
    settings: { id: 7, validFrom: '2026-11-01T00:00:00.000Z', content, author: null, reason },
    stations: Object.entries(stationIds).map(([one, number]) => ({
      id: number,
      code: one,
      name: stationNames[number],
    })),
    outlook: outlookView(id, content, sea),
    lastGood: { windowEndsAt: '2026-11-12T14:10:00.000Z', value: 0.8, sd: 0.1, stationName: 'Fairway' },
    notices: [],
    limits: limits.map((limit, n) => placeLimit(limit.quantity ?? lead, { limitId: n + 1, ...limit })),
    retiredAt: null,
    ...changes,
  }
}
