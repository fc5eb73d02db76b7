/** The quality of a figure at a place: never better than the estimate behind it. QARTOD flags. */
import type { Figure } from '../hazards/figure.ts'
import type { QualityFlag } from '../schemas/estimate.ts'
import type { OutlookFigure } from '../schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../schemas/placeQuantity.ts'

export interface Grounds {
  /** Of the estimate. */
  qualityFlag: QualityFlag
  isSubstitute: boolean
  /** The sea was carried within the range and the sector of its method. */
  isCarriedInRange: boolean
}

/** A substitute, or a method outside its range, gives suspect figures at best; what is not determined has failed. */
export function flagOfFigure(figure: Figure, { qualityFlag, isSubstitute, isCarriedInRange }: Grounds): QualityFlag {
  if (figure.value === null) return 4
  const isDoubtful = isSubstitute || !isCarriedInRange || !figure.validity.inRange
  return isDoubtful && qualityFlag < 3 ? 3 : qualityFlag
}

export const graded = (quantity: PlaceQuantityKey, figure: Figure, grounds: Grounds): OutlookFigure => ({
  quantity,
  figure,
  qualityFlag: flagOfFigure(figure, grounds),
})
