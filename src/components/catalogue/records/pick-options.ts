import { listCalendars } from '#shared/contracts/calendars.ts'
import { listBins, listItems, listRooms, listSuppliers, listWards } from '#shared/contracts/catalogue.ts'
import { call } from '#src/services/api.ts'
import { everyPage } from '#src/services/every-page.ts'
import type { PickSource } from './record-field.ts'

export interface PickOption {
  value: string
  label: string
}

const all = { pageSize: 500 }
const readers: Record<PickSource, (page: number) => Promise<{ items: PickOption[]; total: number }>> = {
  wards: async (page) => named(await call(listWards, { query: { page, ...all } })),
  rooms: async (page) => named(await call(listRooms, { query: { page, ...all } })),
  suppliers: async (page) => named(await call(listSuppliers, { query: { page, ...all } })),
  items: async (page) => {
    const { items, total } = await call(listItems, { query: { page, ...all } })
    return { total, items: items.map((item) => ({ value: item.id, label: `${item.name} (${item.code})` })) }
  },
  calendars: async () => named(await call(listCalendars, { query: {} })),
  bins: async (page) => {
    const { items, total } = await call(listBins, { query: { page, ...all } })
    return {
      total,
      items: items.map((bin) => ({
        value: bin.id,
        label: `${bin.item?.name ?? ''} ${bin.display}, ${bin.roomName}`.trim(),
      })),
    }
  },
}

function named(list: { items: { id: string; name: string }[]; total: number }): { items: PickOption[]; total: number } {
  return { total: list.total, items: list.items.map(({ id, name }) => ({ value: id, label: name })) }
}

/** Everything that can be chosen of one kind; retired ones are left out. */
export const pickOptions = (source: PickSource): Promise<PickOption[]> => everyPage(readers[source])
