/** Observations: what people saw at places, kept beside what was figured, and fitted to it where there are enough. */
export { addObservation, listObservations, withdrawObservation } from './observations/log.ts'
export type { ObservationAuthor } from './observations/log.ts'
export { adoptLocalFit, listLocalFits } from './observations/fits.ts'
