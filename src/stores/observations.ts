/** What people saw at places, and the fits to it: fetched for the page that shows it. */
import { defineStore } from 'pinia'
import type { LocalFitAdoption } from '../../shared/schemas/placeLocalFit.ts'
import type { PlaceView } from '../../shared/schemas/place.ts'
import * as api from '../api/places.ts'
import { usePlaces } from './places.ts'

export const useObservations = defineStore('observations', () => {
  const places = usePlaces()
  async function adopt({ id, version }: PlaceView, adoption: LocalFitAdoption): Promise<void> {
    places.apply({ kind: 'place', body: await api.adoptLocalFit(id, version, adoption) })
  }
  return {
    ...{ read: api.readObservations, log: api.logObservation, withdraw: api.withdrawObservation },
    ...{ readFits: api.readLocalFits, adopt },
  }
})
