/** Pages, each fetched when it is first opened, and who must be signed in for them. */
import { createRouter, createWebHistory } from 'vue-router'
import type { RouteRecordRaw, Router, RouterHistory } from 'vue-router'
import WatchLayout from '../layouts/WatchLayout.vue'
import { useSession } from '../stores/session.ts'
import { useStations } from '../stores/stations.ts'
import { bulletinRoutes } from './bulletins.ts'
import { homeOf } from './home.ts'
import { officeRoutes } from './office.ts'
import { pages } from './pages.ts'
import { placeRoutes } from './places.ts'
import { setUpRoutes } from './setUp.ts'

const routes: RouteRecordRaw[] = [
  {
    path: '/sign-in',
    name: 'signIn',
    component: () => import('../pages/SignInPage.vue'),
    meta: { title: 'Sign in', open: true },
  },
  {
    path: '/first-administrator',
    name: 'firstAdministrator',
    component: () => import('../pages/FirstAdministratorPage.vue'),
    meta: { title: 'First administrator', open: true },
  },
  {
    path: '/receipt/:token',
    name: 'receipt',
    component: () => import('../pages/ReceiptPage.vue'),
    meta: { title: 'Confirm receipt', withoutSession: true },
  },
  {
    path: '/welcome/:token',
    name: 'welcome',
    component: () => import('../pages/WelcomePage.vue'),
    meta: { title: 'Choose a passphrase', withoutSession: true },
  },
  {
    path: '/bulletin',
    name: 'publicBulletin',
    component: () => import('../pages/PublicBulletinPage.vue'),
    meta: { title: 'Bulletin', withoutSession: true },
  },
  {
    path: '/second-factor',
    name: 'enrol',
    component: () => import('../pages/EnrolPage.vue'),
    meta: { title: 'Second factor' },
  },
  {
    path: '/',
    component: WatchLayout,
    children: [
      { path: '', redirect: () => ({ name: homeOf(useSession().person?.role ?? null) }) },
      {
        path: 'watch',
        name: 'watch',
        component: () => import('../pages/WatchPage.vue'),
        meta: { title: 'Watch', page: 'watch' },
      },
      {
        path: 'stations',
        name: 'stations',
        component: () => import('../pages/StationsPage.vue'),
        meta: { title: 'Stations', page: 'stations' },
      },
      {
        path: 'stations/:id([1-9]\\d*)',
        name: 'station',
        component: () => import('../pages/StationPage.vue'),
        meta: { title: 'Station', page: 'stations' },
      },
      {
        path: 'alerts/:id([1-9]\\d*)?',
        name: 'alerts',
        component: () => import('../pages/AlertsPage.vue'),
        meta: { title: 'Alerts', page: 'alerts' },
      },
      {
        path: 'performance',
        name: 'performance',
        component: () => import('../pages/PerformancePage.vue'),
        meta: { title: 'Alert performance', page: 'alerts' },
      },
      {
        path: 'limits',
        name: 'limits',
        component: () => import('../pages/LimitsPage.vue'),
        meta: { title: 'Limits', page: 'limits' },
      },
      {
        path: 'limits/new',
        name: 'newLimit',
        component: () => import('../pages/LimitEditorPage.vue'),
        meta: { title: 'New limit', page: 'limits' },
      },
      {
        path: 'limits/:id([1-9]\\d*)',
        name: 'limit',
        component: () => import('../pages/LimitEditorPage.vue'),
        meta: { title: 'Limit', page: 'limits' },
      },
      {
        path: 'log',
        name: 'log',
        component: () => import('../pages/LogPage.vue'),
        meta: { title: 'Watch log', page: 'log' },
      },
      {
        path: 'messages',
        name: 'messages',
        component: () => import('../pages/MessagesPage.vue'),
        meta: { title: 'Messages', page: 'messages' },
      },
      {
        path: 'lists',
        name: 'lists',
        component: () => import('../pages/ListsPage.vue'),
        meta: { title: 'Lists', page: 'lists' },
      },
      {
        path: 'my-settings',
        name: 'mySettings',
        component: () => import('../pages/MySettingsPage.vue'),
        meta: { title: 'My settings', page: 'mySettings' },
      },
      ...bulletinRoutes,
      ...placeRoutes,
      ...officeRoutes,
      ...setUpRoutes,
      {
        path: ':rest(.*)*',
        name: 'notFound',
        component: () => import('../pages/NotFoundPage.vue'),
        meta: { title: 'No page here' },
      },
    ],
  },
]

export function createOffingRouter(history: RouterHistory = createWebHistory()): Router {
  const router = createRouter({ history, routes, scrollBehavior: (_to, _from, saved) => saved ?? { top: 0 } })

  router.beforeEach(async (to) => {
    // A link in an e-mail says by itself who opens it.
    if (to.meta.withoutSession) return true
    const session = useSession()
    if (session.state === 'unknown') await session.restore().catch(() => undefined)
    const signedIn = session.state === 'in' || session.state === 'ended'
    if (to.meta.open) return signedIn && session.state === 'in' ? { name: 'watch' } : true
    if (session.state === 'in' && session.mustEnrol && to.name !== 'enrol') return { name: 'enrol' }
    const page = pages.find((one) => one.name === to.meta.page)
    if (signedIn) return !page || session.allows(page.action) ? true : { name: 'watch' }
    return { name: 'signIn', query: to.fullPath === '/' || to.path === '/watch' ? {} : { to: to.fullPath } }
  })

  router.afterEach((to) => {
    const station = to.name === 'station' ? useStations().byId(Number(to.params.id)) : undefined
    const title = station?.name ?? String(to.meta.title ?? '')
    document.title = title ? `${title} – Offing` : 'Offing'
  })

  return router
}
