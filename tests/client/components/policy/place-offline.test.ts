import 'fake-indexeddb/auto'
import { createPinia, setActivePinia } from 'pinia'
import { Quasar } from 'quasar'
import { afterEach, expect, it, vi } from 'vitest'
import { createApp, type App } from 'vue'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { User } from '#shared/contracts/people.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import BinPage from '#src/pages/catalogue/BinPage.vue'
import { refreshRoom, refreshRooms } from '#src/services/snapshot.ts'
import { useSessionStore } from '#src/stores/session.ts'
import { aBin, aSnapshot, NOW } from '#tests/support/count-factories.ts'

/** The whole page of a place as a phone without a network shows it: from the copy of the room it keeps. */
const user: User = {
  id: '1',
  name: 'Mira Aldous',
  email: 'nurse@tallowmere.example',
  staffCode: 'N-1',
  role: 'nurse',
  roomIds: ['1'],
}
const input: PolicyInput = {
  intervals: [4, 7, 3, 5, 4, 8, 6, 5, 4, 6].map((quantity) => ({ days: 2, quantity })),
  leadTime: { meanDays: 2 },
  reviewPeriodDays: 1,
  serviceLevel: 0.98,
  order: { packSize: 25 },
}
const worked = reorderPoint(input)
const snapshot = aSnapshot({
  bins: [aBin('1', { reorderPoint: worked.reorderPoint, parLevel: worked.parLevel })],
  policies: [
    {
      binId: '1',
      reorderPoint: worked.reorderPoint,
      parLevel: worked.parLevel,
      meanPerDay: worked.demand!.meanPerDay,
      variancePerDay: worked.demand!.variancePerDay,
      input,
    },
  ],
})
const room = {
  id: '1',
  code: 'A-1',
  name: 'Alder supply room',
  wardId: '1',
  wardName: 'Alder ward',
  wardKind: 'general',
  countEveryDays: 1,
  countDays: '',
  mode: 'calculated',
  bins: 1,
  below: 0,
  retired: false,
}
/** Where the page leads to; nothing is opened here. */
const routes = ['room', 'count', 'restock', 'order', 'aim'].map((name) => ({
  name,
  path: `/${name}/:roomId?`,
  component: { render: () => null },
}))
const headers = { 'Content-Type': 'application/json', 'X-Brimline': '1' }
const answer = (body: unknown): Response => new Response(JSON.stringify(body), { headers })
let app: App | null = null

afterEach(() => {
  app?.unmount()
  app = null
  vi.unstubAllGlobals()
})

async function pageWithoutNetwork(): Promise<HTMLElement> {
  vi.stubGlobal('fetch', vi.fn().mockRejectedValue(new TypeError('Failed to fetch')))
  const pinia = createPinia()
  setActivePinia(pinia)
  const router = createRouter({ history: createMemoryHistory(), routes })
  app = createApp(BinPage, { binId: '1' })
  app.use(pinia).use(Quasar).use(router)
  useSessionStore().user = user
  const root = document.createElement('div')
  app.mount(root)
  return root
}

it('works "why" out on the phone, to the unit, and says that it did', async () => {
  vi.stubGlobal(
    'fetch',
    vi.fn(async (url: string) =>
      answer(url.includes('/sync/snapshot') ? snapshot : { items: [room], total: 1, page: 1, pageSize: 500 }),
    ),
  )
  await refreshRooms(user.id, () => NOW)
  await refreshRoom(user.id, '1', () => NOW)
  const page = await pageWithoutNetwork()
  await vi.waitFor(() => expect(page.textContent).toContain(`Why ${worked.reorderPoint}?`), 5000)
  expect(page.textContent).toContain(`So: order at ${worked.reorderPoint}.`)
  expect(page.textContent).toContain('Worked out on this phone')
  await vi.waitFor(
    () => expect(page.textContent).toContain(`P(use ≤ ${worked.reorderPoint})`.replaceAll(' ', '\u00a0')),
    5000,
  )
  expect(page.querySelectorAll('svg .dot')).toHaveLength(200)
})
