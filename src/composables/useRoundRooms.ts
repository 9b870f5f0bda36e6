import { computed, onScopeDispose, ref, shallowRef } from 'vue'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Room } from '#shared/contracts/catalogue.ts'
import type { RoundDraft } from '#shared/stored/draft/index.ts'
import { draftsOf } from '#src/services/drafts.ts'
import type { LocalBin } from '#src/services/overlay.ts'
import { useRoomsCacheStore } from '#src/stores/rooms-cache.ts'
import { dueBins, isAlive, minutesFor, walkingOrder } from '#src/stores/round.ts'
import { useOutboxStore } from '#src/stores/outbox.ts'
import { useSessionStore } from '#src/stores/session.ts'

const TICK_MS = 60_000

export interface RoundRoom {
  room: Room
  /** Null: the room is not on this phone yet. */
  places: number | null
  due: number
  dueBins: LocalBin[]
  bins: LocalBin[]
  minutes: number
  /** Every place is shut for a planned time. */
  closed: Bin['closed']
  keptAt: number | null
  /** A round left in the middle. */
  open: { done: number; of: number } | null
}

const closureOf = (bins: readonly LocalBin[]): Bin['closed'] =>
  bins.every((bin) => bin.closed) ? (bins[0]?.closed ?? null) : null

/** Every room of this person with what is due in it, from the phone first, then from the record. */
export function useRoundRooms() {
  const rooms = useRoomsCacheStore()
  const outbox = useOutboxStore()
  const session = useSessionStore()
  const drafts = shallowRef<RoundDraft[]>([])
  const now = ref(Date.now())
  const timer = setInterval(() => (now.value = Date.now()), TICK_MS)
  onScopeDispose(() => clearInterval(timer))

  const rows = computed<RoundRoom[]>(() =>
    (rooms.rooms ?? [])
      .filter((room) => !room.retired)
      .map((room) => {
        const bins = rooms.bins(room.id, now.value)
        const due = dueBins(bins, now.value)
        const kept = rooms.kept[room.id]
        const draft = drafts.value.find((one) => one.roomId === room.id && isAlive(one, now.value))
        const done = draft ? Object.keys(draft.done).length : 0
        return {
          room,
          places: kept ? walkingOrder(bins).length : null,
          due: due.length,
          dueBins: due,
          bins,
          minutes: minutesFor(due.length),
          closed: closureOf(bins),
          keptAt: kept?.fetchedAt ?? null,
          open: draft && done > 0 ? { done, of: draft.walk.length } : null,
        }
      })
      .sort((a, b) => b.due - a.due || a.room.name.localeCompare(b.room.name)),
  )

  async function load(): Promise<void> {
    await outbox.load().catch(() => undefined)
    if (session.user) drafts.value = await draftsOf(session.user.id).catch(() => [])
    await rooms.openAll()
    now.value = Date.now()
    // Behind the screen: the list of rooms, then every room, so that any of them can be counted without a network.
    void rooms.loadRooms().then(rooms.keepAll)
  }

  return { rows, load }
}
