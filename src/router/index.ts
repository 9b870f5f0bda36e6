import { createRouter, createWebHistory, type Router } from 'vue-router'
import type { useSessionStore } from '#src/stores/session.ts'
import { commonWords } from '#src/i18n/en.ts'
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
  router.afterEach(() => {
    document.title = commonWords.product
  })
  return router
}
