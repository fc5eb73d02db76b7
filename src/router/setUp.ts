/** The pages of set-up, below `/set-up`. */
import type { RouteRecordRaw } from 'vue-router'

const station = 'set-up/stations/:id([1-9]\\d*)'
const meta = (title: string) => ({ title, page: 'setUp' })

export const setUpRoutes: RouteRecordRaw[] = [
  { path: 'set-up', name: 'setUp', component: () => import('../pages/SetUpPage.vue'), meta: meta('Set-up') },
  {
    path: 'set-up/stations/new',
    name: 'setUpNewStation',
    component: () => import('../pages/SetUpStationPage.vue'),
    meta: meta('New station'),
  },
  {
    path: station,
    name: 'setUpStation',
    component: () => import('../pages/SetUpStationPage.vue'),
    meta: meta('Station, set-up'),
  },
  {
    path: `${station}/array`,
    name: 'setUpArray',
    component: () => import('../pages/SetUpArrayPage.vue'),
    meta: meta('Array, set-up'),
  },
  {
    path: `${station}/sensors`,
    name: 'setUpSensors',
    component: () => import('../pages/SetUpSensorsPage.vue'),
    meta: meta('Sensors, set-up'),
  },
  {
    path: `${station}/link`,
    name: 'setUpLink',
    component: () => import('../pages/SetUpLinkPage.vue'),
    meta: meta('Keys and link, set-up'),
  },
  {
    path: `${station}/readings`,
    name: 'setUpReadings',
    component: () => import('../pages/SetUpReadingsPage.vue'),
    meta: meta('Readings, set-up'),
  },
  {
    path: `${station}/inputs`,
    name: 'setUpInputs',
    component: () => import('../pages/SetUpInputsPage.vue'),
    meta: meta('Other inputs, set-up'),
  },
]
