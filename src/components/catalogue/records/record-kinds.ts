import type { z } from 'zod'
import type { Bin } from '#shared/contracts/bins.ts'
import {
  createBin,
  createItem,
  createRoom,
  createSupplier,
  createWard,
  listBins,
  listItems,
  listRooms,
  listSuppliers,
  listWards,
  updateBin,
  updateItem,
  updateRoom,
  updateSupplier,
  updateWard,
  type Item,
  type Room,
  type Supplier,
  type Ward,
} from '#shared/contracts/catalogue.ts'
import type { Contract, Role } from '#shared/contracts/contract.ts'
import { createUser, listUsers, updateUser, type UserRecord } from '#shared/contracts/people.ts'
import {
  calendarWords,
  decimal,
  hospitalWords,
  quantity,
  replenishmentWords,
  roleWords,
  roomModeWords,
  roomWords,
  vedWords,
  wardKindWords,
  type RecordKind,
} from '#src/i18n/en.ts'
import { recordFields } from './record-fields.ts'
import type { RecordField } from './record-field.ts'

type AnyContract = Contract<z.ZodType, z.ZodType, z.ZodType, z.ZodType>

/** Everything a list page and a form page need to know of a kind of record. */
export interface KindOfRecord {
  kind: RecordKind
  roles: readonly Role[]
  list: AnyContract
  create: AnyContract
  update: AnyContract
  fields: readonly RecordField[]
  columns: readonly { label: string; of: (row: AnyRecord) => string; number?: boolean }[]
  nameOf: (row: AnyRecord) => string
  /** A sentence on what the record shows of it, below its name. */
  factsOf?: (row: AnyRecord) => string
}
export type AnyRecord = Record<string, unknown> & { id: string; retired: boolean }

const c = hospitalWords.columns
const editors: Role[] = ['coordinator', 'administrator']

// The list contract of a kind says what its rows are; here they are read as that type once, in one place.
function kindOf<T extends { id: string; retired: boolean }>(parts: {
  kind: RecordKind
  roles?: readonly Role[]
  list: unknown
  create: unknown
  update: unknown
  columns: readonly { label: string; of: (row: T) => string; number?: boolean }[]
  nameOf: (row: T) => string
  factsOf?: (row: T) => string
}): KindOfRecord {
  return {
    roles: editors,
    ...parts,
    fields: recordFields[parts.kind],
  } as unknown as KindOfRecord
}

export const recordKinds: Record<RecordKind, KindOfRecord> = {
  wards: kindOf<Ward>({
    kind: 'wards',
    list: listWards,
    create: createWard,
    update: updateWard,
    nameOf: (w) => w.name,
    columns: [
      { label: c.name, of: (w) => w.name },
      { label: c.code, of: (w) => w.code },
      { label: c.kind, of: (w) => wardKindWords[w.kind] },
    ],
  }),
  rooms: kindOf<Room>({
    kind: 'rooms',
    list: listRooms,
    create: createRoom,
    update: updateRoom,
    nameOf: (r) => r.name,
    columns: [
      { label: c.name, of: (r) => r.name },
      { label: c.ward, of: (r) => r.wardName },
      { label: c.code, of: (r) => r.code },
      { label: c.rhythm, of: (r) => `${decimal(r.countEveryDays)} days` },
      { label: c.mode, of: (r) => roomModeWords[r.mode].label },
      { label: c.bins, of: (r) => quantity(r.bins), number: true },
    ],
  }),
  items: kindOf<Item>({
    kind: 'items',
    list: listItems,
    create: createItem,
    update: updateItem,
    nameOf: (i) => i.name,
    columns: [
      { label: c.name, of: (i) => i.name },
      { label: c.code, of: (i) => i.code },
      { label: c.ved, of: (i) => vedWords[i.ved] },
      { label: c.pack, of: (i) => replenishmentWords.packs(1, i.orderUnit, i.unitsPerOrder) },
      { label: c.supplier, of: (i) => i.supplierName ?? '' },
    ],
  }),
  suppliers: kindOf<Supplier>({
    kind: 'suppliers',
    list: listSuppliers,
    create: createSupplier,
    update: updateSupplier,
    nameOf: (s) => s.name,
    factsOf: (s) => calendarWords.deliveriesSeen(s.seen),
    columns: [
      { label: c.name, of: (s) => s.name },
      { label: c.code, of: (s) => s.code },
      { label: c.email, of: (s) => s.email },
      { label: c.orderDays, of: (s) => hospitalWords.daysOf(s.orderDays) },
      { label: c.cutOff, of: (s) => s.cutOff },
    ],
  }),
  bins: kindOf<Bin>({
    kind: 'bins',
    list: listBins,
    create: createBin,
    update: updateBin,
    nameOf: (b) => b.item?.name ?? b.display,
    columns: [
      { label: c.item, of: (b) => b.item?.name ?? hospitalWords.nothing },
      { label: c.code, of: (b) => b.display },
      { label: c.room, of: (b) => b.roomName },
      { label: c.shelf, of: (b) => roomWords.shelf(b.bay, b.shelf) },
      { label: c.capacity, of: (b) => (b.capacity === null ? '' : quantity(b.capacity)), number: true },
      { label: c.point, of: (b) => (b.reorderPoint === null ? '' : quantity(b.reorderPoint)), number: true },
    ],
  }),
  people: kindOf<UserRecord>({
    kind: 'people',
    roles: ['administrator'],
    list: listUsers,
    create: createUser,
    update: updateUser,
    nameOf: (u) => u.name,
    columns: [
      { label: c.name, of: (u) => u.name },
      { label: c.role, of: (u) => roleWords[u.role] },
      { label: c.email, of: (u) => u.email },
      { label: c.staffCode, of: (u) => u.staffCode },
      { label: c.rooms, of: (u) => (u.roomIds === null ? hospitalWords.everyRoom : quantity(u.roomIds.length)) },
    ],
  }),
}

/** The kinds a role may change. */
export const kindsFor = (role: Role | null): KindOfRecord[] =>
  Object.values(recordKinds).filter((kind) => role !== null && kind.roles.includes(role))
