import { createRouter, createWebHistory, type Router } from 'vue-router'
import type { useSessionStore } from '#src/stores/session.ts'
import { commonWords, shellWords } from '#src/i18n/en.ts'
import { guard } from './guards.ts'
import { routes } from './routes.ts'

export function makeRouter(session: ReturnType<typeof useSessionStore>): Router {
  const router = createRouter({
    history: createWebHistory(),
    routes,
  })
  router.beforeEach(async (to) => {
    await session.restore()
    return guard(to, session)
  })
  router.afterEach((to) => {
    const word = shellWords.titleOf(to.meta.place, String(to.name ?? ''))
    document.title = word ? `${word} · ${commonWords.product}` : commonWords.product
  })
  return router
}
