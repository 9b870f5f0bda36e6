import { defineStore } from 'pinia'
import { ref, shallowRef } from 'vue'
import type { Room } from '#shared/contracts/catalogue.ts'
import { overlayBins, overlayLines, type LocalBin } from '#src/services/overlay.ts'
import { dropReads, keptRoom, keptRooms, refreshRoom, refreshRooms, type KeptRoom } from '#src/services/snapshot.ts'
import { useOutboxStore } from './outbox.ts'
import { useSessionStore } from './session.ts'

/** A place found by what was scanned, in whichever kept room it is. */
export interface FoundPlace {
  roomId: string
  binId: string
}

/**
 * Rooms as this phone knows them: shown from the phone at once, brought up to date behind it. Nothing here waits for
 * the network, and every figure can be shown with its time.
 */
export const useRoomsCacheStore = defineStore('rooms-cache', () => {
  const session = useSessionStore()
  const outbox = useOutboxStore()
  const rooms = shallowRef<Room[] | null>(null)
  const roomsAt = ref<number | null>(null)
  const kept = shallowRef<Record<string, KeptRoom>>({})
  /** The last thing that went wrong while reading behind; null after a good answer. */
  const trouble = shallowRef<unknown>(null)

  const userId = (): string | null => session.user?.id ?? null

  async function clear(): Promise<void> {
    rooms.value = null
    roomsAt.value = null
    kept.value = {}
    await dropReads()
  }
  session.onClearReads(clear)

  function take(room: KeptRoom): void {
    kept.value = { ...kept.value, [room.roomId]: room }
    if (room.authzVersion !== session.authzVersion) void session.confirm().catch(() => undefined)
  }

  /** From the phone when it is not here yet. Never from the network. */
  async function openKept(roomId: string): Promise<KeptRoom | null> {
    const id = userId()
    if (!id) return null
    const here = kept.value[roomId] ?? (await keptRoom(id, roomId))
    if (here && userId() === id && !kept.value[roomId]) kept.value = { ...kept.value, [roomId]: here }
    return here
  }

  async function refresh(roomId: string): Promise<void> {
    const id = userId()
    if (!id) return
    try {
      const fresh = await refreshRoom(id, roomId, () => Date.now())
      if (userId() === id) take(fresh)
      trouble.value = null
    } catch (error) {
      trouble.value = error
    }
  }

  /** The list of rooms from this phone. */
  async function openRooms(): Promise<void> {
    const id = userId()
    const here = id && !rooms.value ? await keptRooms(id) : null
    if (!here || userId() !== id) return
    rooms.value = here.rooms
    roomsAt.value = here.fetchedAt
  }

  /** Every room this phone keeps, without a network. */
  async function openAll(): Promise<void> {
    await openRooms()
    for (const room of rooms.value ?? []) await openKept(room.id)
  }

  async function loadRooms(): Promise<void> {
    const id = userId()
    if (!id) return
    await openRooms()
    try {
      const fresh = await refreshRooms(id, () => Date.now())
      if (userId() !== id) return
      rooms.value = fresh.rooms
      roomsAt.value = fresh.fetchedAt
      trouble.value = null
    } catch (error) {
      trouble.value = error
    }
  }

  /** Keeps every room of this person, so that any of them can be counted later without a network. */
  async function keepAll(): Promise<void> {
    for (const room of rooms.value ?? []) {
      await openKept(room.id)
      await refresh(room.id)
      if (trouble.value) return
    }
  }

  const bins = (roomId: string, now: number): LocalBin[] => {
    const room = kept.value[roomId]
    return room ? overlayBins(room, outbox.entries, now) : []
  }
  const openLines = (roomId: string, binId: string) => {
    const room = kept.value[roomId]
    return room ? overlayLines(room, outbox.entries, binId) : []
  }

  /** The place with a shelf code, preferring the room in hand. */
  async function findCode(code: string, roomId: string): Promise<FoundPlace | null> {
    const ids = [roomId, ...(rooms.value ?? []).map((room) => room.id).filter((id) => id !== roomId)]
    for (const id of ids) {
      const bin = (await openKept(id))?.bins.find((one) => one.code === code)
      if (bin) return { roomId: id, binId: bin.id }
    }
    return null
  }

  /** Places of the room in hand that hold the item with a GTIN. */
  function findGtin(gtin: string, roomId: string): string[] {
    const room = kept.value[roomId]
    const items = new Set(room?.barcodes.filter((row) => row.gtin === gtin).map((row) => row.itemId))
    return (room?.bins ?? []).filter((bin) => bin.itemId !== null && items.has(bin.itemId)).map((bin) => bin.id)
  }

  return {
    rooms,
    roomsAt,
    kept,
    trouble,
    loadRooms,
    keepAll,
    openKept,
    openAll,
    refresh,
    bins,
    openLines,
    findCode,
    findGtin,
  }
})
