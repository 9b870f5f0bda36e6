import {
  boolean,
  date,
  double,
  index,
  int,
  mysqlTable,
  primaryKey,
  tinyint,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core'
import { id, instant, ref } from '../db/columns.ts'
import type { RoomMode, Ved } from '#shared/contracts/catalogue.ts'

/** One row: the organisation this database belongs to. */
export const hospitals = mysqlTable('hospitals', {
  id: tinyint().primaryKey(),
  name: varchar({ length: 120 }).notNull(),
  timeZone: varchar({ length: 60 }).notNull(),
  binWord: varchar({ length: 20 }).$type<'bin' | 'place' | 'shelf place'>().notNull(),
  currency: varchar({ length: 3 }).notNull(),
  floorLevel: double().notNull(),
  ceilingLevel: double().notNull(),
  isTwoPersons: boolean().notNull(),
  vitalPolicyText: varchar({ length: 600 }).notNull(),
  vitalPolicyLink: varchar({ length: 300 }).notNull(),
  resupplyPhone: varchar({ length: 60 }).notNull(),
  orderingCost: double().notNull(),
  holdingRatePerYear: double().notNull(),
  /** Closed days wherever no other calendar is named. */
  calendarId: ref(),
  /** Places with few counts learn from like wards. */
  isPooling: boolean().notNull().default(true),
  isDemo: boolean().notNull(),
  createdAt: instant().notNull(),
})

/** Named lists of closed days: of a supplier, the stores, a ward. */
export const calendars = mysqlTable('calendars', {
  id: id(),
  name: varchar({ length: 120 }).notNull().unique(),
  retiredAt: instant(),
})

export const calendarDays = mysqlTable(
  'calendar_days',
  {
    calendarId: ref()
      .notNull()
      .references(() => calendars.id),
    date: date({ mode: 'string' }).notNull(),
    name: varchar({ length: 120 }).notNull(),
  },
  (t) => [primaryKey({ columns: [t.calendarId, t.date] })],
)

export const wards = mysqlTable('wards', {
  id: id(),
  code: varchar({ length: 32 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  kind: varchar({ length: 20 })
    .$type<'general' | 'intensive' | 'theatre' | 'emergency' | 'children' | 'maternity' | 'outpatient' | 'stores'>()
    .notNull(),
  site: varchar({ length: 120 }).notNull(),
  calendarId: ref(),
  retiredAt: instant(),
})

export const rooms = mysqlTable('rooms', {
  id: id(),
  code: varchar({ length: 32 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  wardId: ref()
    .notNull()
    .references(() => wards.id),
  countEveryDays: double().notNull(),
  /** Weekdays on which it is counted, as digits; empty is every day. */
  countDays: varchar({ length: 7 }).notNull().default(''),
  mode: varchar({ length: 20 }).$type<RoomMode>().notNull(),
  retiredAt: instant(),
})

export const suppliers = mysqlTable('suppliers', {
  id: id(),
  code: varchar({ length: 32 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  email: varchar({ length: 200 }).notNull(),
  kind: varchar({ length: 20 }).$type<'stores' | 'outside'>().notNull(),
  orderDays: varchar({ length: 7 }).notNull(),
  cutOff: varchar({ length: 5 }).notNull(),
  arrivalDays: varchar({ length: 7 }).notNull(),
  arrivalTime: varchar({ length: 5 }).notNull(),
  leadWorkingDays: int().notNull(),
  minimumOrder: double().notNull(),
  leadTimeDays: double(),
  leadTimeSd: double(),
  calendarId: ref(),
  retiredAt: instant(),
})

export const items = mysqlTable(
  'items',
  {
    id: id(),
    code: varchar({ length: 32 }).notNull().unique(),
    name: varchar({ length: 120 }).notNull(),
    orderName: varchar({ length: 200 }).notNull(),
    /** Never changes once the ledger has rows of the item. */
    unitOfUse: varchar({ length: 30 }).notNull(),
    unitCode: varchar({ length: 3 }).notNull(),
    countUnit: varchar({ length: 30 }).notNull(),
    countNote: varchar({ length: 200 }).notNull(),
    ved: varchar({ length: 1 }).$type<Ved>().notNull(),
    category: varchar({ length: 60 }).notNull(),
    shelfLifeDays: int(),
    minShelfDays: int(),
    isLatex: boolean().notNull(),
    isColdChain: boolean().notNull(),
    retiredAt: instant(),
  },
  (t) => [index('items_name').on(t.name)],
)

/** Packs are dated: an old order keeps the pack it was written in. */
export const itemPacks = mysqlTable(
  'item_packs',
  {
    id: id(),
    itemId: ref()
      .notNull()
      .references(() => items.id),
    orderUnit: varchar({ length: 30 }).notNull(),
    unitsPerOrder: int().notNull(),
    validFrom: instant().notNull(),
    validTo: instant(),
  },
  (t) => [index('item_packs_item').on(t.itemId, t.validTo)],
)

export const itemBarcodes = mysqlTable(
  'item_barcodes',
  {
    id: id(),
    itemId: ref()
      .notNull()
      .references(() => items.id),
    gtin: varchar({ length: 14 }).notNull(),
    level: varchar({ length: 4 }).$type<'each' | 'pack'>().notNull(),
  },
  (t) => [unique('item_barcodes_gtin_item').on(t.gtin, t.itemId), index('item_barcodes_item').on(t.itemId)],
)

/** Who supplies an item, under which number and at which price for one unit of use. */
export const supplyAgreements = mysqlTable(
  'supply_agreements',
  {
    id: id(),
    itemId: ref()
      .notNull()
      .references(() => items.id),
    supplierId: ref()
      .notNull()
      .references(() => suppliers.id),
    supplierItem: varchar({ length: 60 }).notNull(),
    price: double(),
    currency: varchar({ length: 3 }).notNull(),
    isPreferred: boolean().notNull(),
  },
  (t) => [unique('supply_agreements_item_supplier').on(t.itemId, t.supplierId)],
)

export const lookalikes = mysqlTable(
  'lookalikes',
  {
    itemId: ref()
      .notNull()
      .references(() => items.id),
    otherItemId: ref()
      .notNull()
      .references(() => items.id),
  },
  (t) => [primaryKey({ columns: [t.itemId, t.otherItemId] })],
)

export const bins = mysqlTable(
  'bins',
  {
    id: id(),
    /** Eight characters, without its hyphen. */
    code: varchar({ length: 40 }).notNull().unique(),
    kind: varchar({ length: 12 }).$type<'counted' | 'two-bin' | 'fixed-set'>().notNull(),
    overflowOf: ref(),
    roomId: ref()
      .notNull()
      .references(() => rooms.id),
    bay: varchar({ length: 20 }).notNull(),
    shelf: varchar({ length: 20 }).notNull(),
    walkOrder: int().notNull(),
    retiredAt: instant(),
  },
  (t) => [index('bins_room').on(t.roomId, t.walkOrder), index('bins_overflow').on(t.overflowOf)],
)

/** What a bin held, when: levels, demand and orders live inside one assignment. */
export const binAssignments = mysqlTable(
  'bin_assignments',
  {
    id: id(),
    binId: ref()
      .notNull()
      .references(() => bins.id),
    itemId: ref()
      .notNull()
      .references(() => items.id),
    assignedFrom: instant().notNull(),
    assignedTo: instant(),
    enteredPar: int(),
    enteredReorderPoint: int(),
    capacity: int(),
  },
  (t) => [
    index('bin_assignments_bin').on(t.binId, t.assignedTo),
    index('bin_assignments_item').on(t.itemId, t.assignedTo),
  ],
)
