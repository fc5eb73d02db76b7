/** Pages of administrators about the office itself: people, audit, settings, system. */
import type { RouteRecordRaw } from 'vue-router'

const meta = (title: string) => ({ title, page: 'setUp' })

export const officeRoutes: RouteRecordRaw[] = [
  {
    path: 'people/:id([1-9]\\d*)?',
    name: 'people',
    component: () => import('../pages/PeoplePage.vue'),
    meta: meta('People'),
  },
]
