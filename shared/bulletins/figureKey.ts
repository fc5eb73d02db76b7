/** `station:3`, `place:1`: how a draft names a figure. */
import type { BulletinFigure } from '../schemas/bulletin.ts'

export function figureKey(figure: BulletinFigure): string {
  if (figure.kind === 'missing') return `${figure.subject}:${figure.subjectId}`
  return figure.kind === 'station' ? `station:${figure.stationId}` : `place:${figure.placeId}`
}

/** The figures that the draft names, in its order; one that is no longer there is left out. */
export const chosenFigures = (figures: readonly BulletinFigure[], chosen: readonly string[]): BulletinFigure[] =>
  chosen.flatMap((key) => figures.find((figure) => figureKey(figure) === key) ?? [])
