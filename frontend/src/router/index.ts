import {
  createRouter,
  createWebHistory,
  type RouteLocationNormalized,
  type RouteRecordRaw,
  type Router,
} from 'vue-router'
import { onSessionEnd } from '../api/client'
import { useAnnouncer } from '../composables/useAnnouncer'
import { translate } from '../i18n'
import { queryClient } from '../queries'
import { nextPath } from './nextPath'
import { useSessionStore } from '../stores/session'

declare module 'vue-router' {
  interface RouteMeta {
    /** Reachable without signing in. */
    open?: boolean
    /** Key of the page's name, for the window title. */
    title?: string
  }
}

const farmPages: RouteRecordRaw[] = [
  { path: '', name: 'home', component: () => import('../views/home/HomeView.vue'), meta: { title: 'nav.home' } },
  { path: 'feeds', name: 'feeds', component: () => import('../views/feeds/FeedsView.vue'), meta: { title: 'nav.feeds' } },
  { path: 'feeds/new', name: 'feed-new', component: () => import('../views/feeds/FeedNewView.vue'), meta: { title: 'nav.feedNew' } },
  { path: 'feeds/book', name: 'feeds-book', component: () => import('../views/feeds/FeedBookView.vue'), meta: { title: 'nav.feedsBook' } },
  { path: 'feeds/:feedId', name: 'feed', component: () => import('../views/feeds/FeedView.vue'), props: true, meta: { title: 'nav.feeds' } },
  { path: 'prices', name: 'prices', component: () => import('../views/prices/PricesView.vue'), meta: { title: 'nav.prices' } },
  { path: 'prices/import', name: 'price-import', component: () => import('../views/prices/ImportView.vue'), meta: { title: 'nav.imports' } },
  { path: 'prices/imports', name: 'price-imports', component: () => import('../views/prices/ImportsView.vue'), meta: { title: 'nav.importsPast' } },
  { path: 'groups', name: 'groups', component: () => import('../views/groups/GroupsView.vue'), meta: { title: 'nav.groups' } },
  { path: 'groups/new', name: 'group-new', component: () => import('../views/groups/GroupView.vue'), meta: { title: 'nav.groupNew' } },
  { path: 'groups/:groupId', name: 'group', component: () => import('../views/groups/GroupView.vue'), props: true, meta: { title: 'nav.groups' } },
  { path: 'mixes', name: 'mixes', component: () => import('../views/mixes/MixesView.vue'), meta: { title: 'nav.mixes' } },
  { path: 'mixes/:mixId', name: 'mix', component: () => import('../views/mixes/MixBenchView.vue'), props: true, meta: { title: 'nav.mixes' } },
  { path: 'scenarios', name: 'scenarios', component: () => import('../views/scenarios/ScenariosView.vue'), meta: { title: 'nav.scenarios' } },
  { path: 'scenarios/compare', name: 'scenarios-compare', component: () => import('../views/scenarios/ScenarioCompareView.vue'), meta: { title: 'nav.scenariosCompare' } },
  { path: 'scenarios/:scenarioId', name: 'scenario', component: () => import('../views/scenarios/ScenarioView.vue'), props: true, meta: { title: 'nav.scenarios' } },
  { path: 'farm', name: 'farm', component: () => import('../views/farm/FarmView.vue'), meta: { title: 'nav.farm' } },
] // prettier-ignore

const notFound = () => import('../views/NotFoundView.vue')

const routes: RouteRecordRaw[] = [
  { path: '/', name: 'landing', component: () => import('../views/account/LandingView.vue'), meta: { open: true } },
  { path: '/sign-in', name: 'sign-in', component: () => import('../views/account/SignInView.vue'), meta: { open: true, title: 'account.signIn.name' } },
  { path: '/sign-up', name: 'sign-up', component: () => import('../views/account/SignUpView.vue'), meta: { open: true, title: 'account.signUp.name' } },
  { path: '/reviews', name: 'reviews', component: () => import('../views/reviews/ReviewsView.vue'), meta: { title: 'nav.reviews' } },
  { path: '/farms/:farmId', component: () => import('../views/FarmFrame.vue'), children: farmPages },
  { path: '/:path(.*)*', name: 'not-found', component: notFound, meta: { open: true, title: 'common.notFound.title' } },
] // prettier-ignore

async function guard(to: RouteLocationNormalized) {
  const session = useSessionStore()
  if (to.meta.open && !session.mayBeSignedIn()) return true
  try {
    await session.load()
  } catch {
    // The API does not answer: the sign-in page says so and keeps where to go on.
    return to.meta.open ? true : { name: 'sign-in', query: { next: to.fullPath, why: 'unreachable' } }
  }
  if (!session.session) return to.meta.open ? true : { name: 'sign-in', query: { next: to.fullPath } }
  if (to.name === 'sign-in' && nextPath(to.query)) return nextPath(to.query)
  if (to.name === 'landing' || to.name === 'sign-in' || to.name === 'sign-up') {
    return session.homeFarmId ? { name: 'home', params: { farmId: session.homeFarmId } } : true
  }
  const farmId = to.params['farmId']
  if (typeof farmId === 'string' && !session.enter(farmId)) {
    return { name: 'not-found', params: { path: to.path.slice(1).split('/') } }
  }
  return true
}

export function createAppRouter(): Router {
  const router = createRouter({
    history: createWebHistory(),
    routes,
    scrollBehavior: (_to, _from, saved) => saved ?? { top: 0 },
  })
  router.beforeEach(guard)
  const { announce } = useAnnouncer()
  router.afterEach((to, from) => {
    document.title = to.meta.title ? `${translate(to.meta.title)} · Maslin` : 'Maslin'
    // A page that changes without loading says nothing by itself to those who do not see it.
    if (to.meta.title && from.matched.length && to.name !== from.name) void announce(translate(to.meta.title))
  })
  onSessionEnd(() => {
    const session = useSessionStore()
    if (!session.session) return
    session.forget()
    queryClient.clear()
    const next = router.currentRoute.value.fullPath
    void router.push({ name: 'sign-in', query: { next, why: 'ended' } })
  })
  return router
}
