/** Places, and their set-up. */
import type { RouteRecordRaw } from 'vue-router'

export const placeRoutes: RouteRecordRaw[] = [
  {
    path: 'places',
    name: 'places',
    component: () => import('../pages/PlacesPage.vue'),
    meta: { title: 'Places', page: 'places' },
  },
  {
    path: 'places/:id([1-9]\\d*)',
    name: 'place',
    component: () => import('../pages/PlacePage.vue'),
    meta: { title: 'Place', page: 'places' },
  },
  {
    path: 'set-up/places',
    name: 'setUpPlaces',
    component: () => import('../pages/PlacesSetUpPage.vue'),
    meta: { title: 'Places, set-up', page: 'setUp' },
  },
  {
    path: 'set-up/places/new',
    name: 'setUpNewPlace',
    component: () => import('../pages/PlaceSetUpPage.vue'),
    meta: { title: 'New place', page: 'setUp' },
  },
  {
    path: 'set-up/places/:id([1-9]\\d*)',
    name: 'setUpPlace',
    component: () => import('../pages/PlaceSetUpPage.vue'),
    meta: { title: 'Place, set-up', page: 'setUp' },
  },
]
