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
]
