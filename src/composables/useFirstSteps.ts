import { computed, ref, watch, type ComputedRef } from 'vue'
import { listBins, listItems, listSuppliers, listWards, type Room } from '#shared/contracts/catalogue.ts'
import { listUsers } from '#shared/contracts/people.ts'
import type { RecordKind } from '#src/i18n/en.ts'
import { call } from '#src/services/api.ts'
import { useCatalogueStore } from '#src/stores/catalogue.ts'
import { useSessionStore } from '#src/stores/session.ts'

export interface FirstStep {
  kind: RecordKind
  /** How many there are; null until it is known. */
  count: number | null
}

const one = { page: 1, pageSize: 1 }
const order: RecordKind[] = ['wards', 'rooms', 'suppliers', 'items', 'bins', 'people']

async function totalOf(kind: RecordKind, rooms: readonly Room[]): Promise<number> {
  switch (kind) {
    case 'wards':
      return (await call(listWards, { query: one })).total
    case 'rooms':
      return rooms.length
    case 'suppliers':
      return (await call(listSuppliers, { query: one })).total
    case 'items':
      return (await call(listItems, { query: one })).total
    case 'bins':
      return (await call(listBins, { query: one })).total
    case 'people':
      return (await call(listUsers, { query: one })).total
  }
}

/**
 * What an empty hospital still needs, in the order in which one thing builds on another. Empty once any place stands,
 * and for roles that cannot add anything.
 */
export function useFirstSteps(): { steps: ComputedRef<FirstStep[]>; isEmpty: ComputedRef<boolean> } {
  const catalogue = useCatalogueStore()
  const session = useSessionStore()
  const counts = ref<Partial<Record<RecordKind, number>>>({})
  const isEmpty = computed(() => catalogue.rooms !== null && catalogue.rooms.every((room) => room.bins === 0))
  const kinds = computed(() =>
    session.role === 'administrator'
      ? order
      : session.role === 'coordinator'
        ? order.filter((kind) => kind !== 'people')
        : [],
  )
  void catalogue.loadRooms().catch(() => undefined)
  watch(
    isEmpty,
    (empty) => {
      if (!empty) return
      for (const kind of kinds.value)
        void totalOf(kind, catalogue.rooms ?? [])
          .then((total) => (counts.value = { ...counts.value, [kind]: total }))
          .catch(() => undefined)
    },
    { immediate: true },
  )
  const steps = computed(() =>
    isEmpty.value ? kinds.value.map((kind) => ({ kind, count: counts.value[kind] ?? null })) : [],
  )
  return { steps, isEmpty }
}
