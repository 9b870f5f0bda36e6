import { computed, watch, type ComputedRef, type Ref } from 'vue'
import type { Bin } from '#shared/contracts/bins.ts'
import type { LocalBin } from '#src/services/overlay.ts'
import { useCatalogueStore } from '#src/stores/catalogue.ts'
import { useRoomsCacheStore } from '#src/stores/rooms-cache.ts'
import { useSessionStore } from '#src/stores/session.ts'
import { useLoad } from './useLoad.ts'

export interface RoomBins {
  /** Null until there is anything to show. */
  bins: ComputedRef<readonly (Bin | LocalBin)[] | null>
  error: Ref<unknown>
  loading: Ref<boolean>
  reload: () => Promise<void>
  /** When the figures shown were read, if they come from the phone and not from the record; else null. */
  keptAt: ComputedRef<number | null>
}

/**
 * The bins of a room: from the record, or from the phone where the record cannot be reached or this phone holds counts
 * that are not in it yet.
 */
export function useRoomBins(roomId: () => string): RoomBins {
  const catalogue = useCatalogueStore()
  const session = useSessionStore()
  const cache = useRoomsCacheStore()
  const { error, loading, reload } = useLoad(roomId, async (id, signal) => {
    const known = catalogue.rooms ?? (await catalogue.loadRooms(signal))
    if (!known.some((room) => room.id === id)) await catalogue.loadRooms(signal)
    await catalogue.loadRoomBins(id, signal)
  })
  // Reviewers and administrators do not count, so their phones keep no rooms.
  const counts = computed(() => session.role === 'nurse' || session.role === 'coordinator')
  watch(roomId, (id) => counts.value && void cache.openKept(id).catch(() => undefined), { immediate: true })

  const local = computed(() => (cache.kept[roomId()] ? cache.bins(roomId(), Date.now()) : null))
  const unsent = computed(() => local.value?.some((bin) => bin.waiting) ?? false)
  const read = computed(() => catalogue.binsByRoom[roomId()] ?? null)
  const fromPhone = computed(() => local.value !== null && (unsent.value || read.value === null))
  const bins = computed(() => (fromPhone.value ? local.value : read.value))
  const keptAt = computed(() => (fromPhone.value && error.value ? (cache.kept[roomId()]?.fetchedAt ?? null) : null))
  return { bins, error, loading, reload, keptAt }
}
