import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { Bin } from '#shared/contracts/bins.ts'
import { listBins, listRooms, readBin, type Room } from '#shared/contracts/catalogue.ts'
import { Hospital, readHospital } from '#shared/contracts/hospital.ts'
import { call } from '#src/services/api.ts'
import { everyPage } from '#src/services/every-page.ts'
import { useSessionStore } from './session.ts'

// Zone, noun and policy text are needed to say anything at all, so they are kept for starts without a network.
const KEY = 'brimline.hospital'

function keptHospital(): Hospital | null {
  try {
    const parsed = Hospital.safeParse(JSON.parse(localStorage.getItem(KEY) ?? 'null'))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

/** Rooms and their bins as last read, shared by the list, the pane beside it and the pages of single bins. */
export const useCatalogueStore = defineStore('catalogue', () => {
  const hospital = ref<Hospital | null>(keptHospital())
  const rooms = shallowRef<Room[] | null>(null)
  const binsByRoom = shallowRef<Record<string, Bin[]>>({})
  /** Rooms of bins that were opened by themselves. */
  const roomOfBin = shallowRef<Record<string, string>>({})

  const zone = computed(() => hospital.value?.timeZone ?? 'Europe/London')
  const binNoun = computed(() => hospital.value?.binWord)
  const currency = computed(() => hospital.value?.currency ?? 'GBP')

  function setHospital(next: Hospital): void {
    hospital.value = next
    try {
      localStorage.setItem(KEY, JSON.stringify(next))
    } catch {
      // Read again at the next start then.
    }
  }

  async function loadHospital(): Promise<Hospital> {
    const next = await call(readHospital)
    setHospital(next)
    return next
  }

  async function loadRooms(signal?: AbortSignal): Promise<Room[]> {
    rooms.value = await everyPage((page) => call(listRooms, { query: { page, pageSize: 500 }, signal }))
    return rooms.value
  }

  async function loadRoomBins(roomId: string, signal?: AbortSignal): Promise<Bin[]> {
    const bins = await everyPage((page) => call(listBins, { query: { roomId, page, pageSize: 500 }, signal }))
    binsByRoom.value = { ...binsByRoom.value, [roomId]: bins }
    return bins
  }

  /** Reads one bin and puts it in its room's list, so that both panes agree. */
  async function loadBin(id: string, signal?: AbortSignal): Promise<Bin> {
    const bin = await call(readBin, { params: { id }, signal })
    roomOfBin.value = { ...roomOfBin.value, [id]: bin.roomId }
    const listed = binsByRoom.value[bin.roomId]
    if (listed) {
      binsByRoom.value = { ...binsByRoom.value, [bin.roomId]: listed.map((b) => (b.id === id ? bin : b)) }
    }
    return bin
  }

  useSessionStore().onClearReads(() => {
    rooms.value = null
    binsByRoom.value = {}
    roomOfBin.value = {}
  })

  return {
    hospital,
    rooms,
    binsByRoom,
    roomOfBin,
    zone,
    binNoun,
    currency,
    setHospital,
    loadHospital,
    loadRooms,
    loadRoomBins,
    loadBin,
  }
})
