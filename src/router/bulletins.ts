/** Bulletins: their list, a draft in the composer or an issue as it was frozen. */
import type { RouteRecordRaw } from 'vue-router'

export const bulletinRoutes: RouteRecordRaw[] = [
  {
    path: 'bulletins',
    name: 'bulletins',
    component: () => import('../pages/BulletinsPage.vue'),
    meta: { title: 'Bulletins', page: 'bulletins' },
  },
  {
    path: 'bulletins/:id([1-9]\\d*)',
    name: 'bulletin',
    component: () => import('../pages/BulletinPage.vue'),
    meta: { title: 'Bulletin', page: 'bulletins' },
  },
]
