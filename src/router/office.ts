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
  { path: 'audit', name: 'audit', component: () => import('../pages/AuditPage.vue'), meta: meta('Audit') },
  {
    path: 'settings',
    name: 'officeSettings',
    component: () => import('../pages/OfficeSettingsPage.vue'),
    meta: meta('Settings'),
  },
  { path: 'system', name: 'system', component: () => import('../pages/SystemPage.vue'), meta: meta('System') },
]
