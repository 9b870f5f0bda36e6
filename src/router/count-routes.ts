import type { RouteRecordRaw } from 'vue-router'

const meta = { place: 'count', offline: true, roles: ['nurse', 'coordinator'] as const }

/**
 * The pages of a counting round, all of them working without a network. `count` takes an optional room and leads to
 * its round, or to the choice of a room.
 */
export const countRoutes: RouteRecordRaw[] = [
  {
    path: 'count/go/:roomId?',
    name: 'count',
    redirect: (to) =>
      to.params.roomId
        ? { name: 'count-round', params: { roomId: to.params.roomId }, query: to.query }
        : { name: 'count-rooms' },
  },
  { path: 'count', name: 'count-rooms', component: () => import('#src/pages/counts/RoundListPage.vue'), meta },
  { path: 'count/entries', name: 'count-entries', component: () => import('#src/pages/counts/EntriesPage.vue'), meta },
  {
    path: 'count/room/:roomId',
    name: 'count-round',
    component: () => import('#src/pages/counts/CountPage.vue'),
    props: (to) => ({
      roomId: String(to.params.roomId),
      bin: typeof to.query.bin === 'string' ? to.query.bin : undefined,
      all: to.query.all === '1',
    }),
    meta: { ...meta, full: true },
  },
]
