import { z } from 'zod'
import { Bin, binStates } from './bins.ts'
import { code, contract, Id, idParams, listOf, pageQuery, text } from './contract.ts'

const editors = ['coordinator', 'administrator'] as const
const retiredQuery = { retired: z.enum(['yes', 'no']).default('no') }
const listQuery = z.object({ ...pageQuery, q: z.string().trim().max(100).optional(), ...retiredQuery })
const wholeNumber = (max: number) => z.number().int('whole numbers only').min(0).max(max)

export const WardKind = z.enum([
  'general',
  'intensive',
  'theatre',
  'emergency',
  'children',
  'maternity',
  'outpatient',
  'stores',
])
export const RoomMode = z.enum(['as-before', 'beside', 'calculated'])
export type RoomMode = z.infer<typeof RoomMode>
export const Ved = z.enum(['V', 'E', 'D'])
export type Ved = z.infer<typeof Ved>

// Wards and rooms -------------------------------------------------------------------------------------------------
const wardFields = {
  code,
  name: text(120),
  kind: WardKind,
  site: z.string().trim().max(120),
  /** Days on which it takes no deliveries and counts nothing; null is the hospital's. */
  calendarId: Id.nullable(),
}
export const Ward = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  kind: WardKind,
  site: z.string(),
  calendarId: Id.nullable(),
  retired: z.boolean(),
})
export type Ward = z.infer<typeof Ward>
export const listWards = contract({
  method: 'GET',
  path: '/wards',
  summary: 'Wards',
  allow: editors,
  query: listQuery,
  answer: listOf(Ward),
})
export const createWard = contract({
  method: 'POST',
  path: '/wards',
  summary: 'Add a ward',
  allow: editors,
  body: z.strictObject({
    ...wardFields,
    site: wardFields.site.default(''),
    calendarId: wardFields.calendarId.default(null),
  }),
  answer: Ward,
  status: 201,
})
export const updateWard = contract({
  method: 'PATCH',
  path: '/wards/:id',
  summary: 'Change or retire a ward',
  allow: editors,
  params: idParams,
  body: z.strictObject({ ...wardFields, retired: z.boolean() }).partial(),
  answer: Ward,
})

/** Weekdays as digits. */
const days = z
  .string()
  .regex(/^(?!.*(.).*\1)[1-7]{0,7}$/, 'digits 1 (Monday) to 7, each once: 14 is Monday and Thursday')

const roomFields = {
  code,
  name: text(120),
  wardId: Id,
  countEveryDays: z.number().min(0.5, 'at least half a day').max(90, 'at most 90 days'),
  /** Weekdays on which it is counted; empty is every day. */
  countDays: days,
  mode: RoomMode,
}
export const Room = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  wardId: Id,
  wardName: z.string(),
  wardKind: WardKind,
  countEveryDays: z.number(),
  countDays: z.string(),
  mode: RoomMode,
  bins: z.number().int(),
  below: z.number().int(),
  retired: z.boolean(),
})
export type Room = z.infer<typeof Room>
export const listRooms = contract({
  method: 'GET',
  path: '/rooms',
  summary: 'Rooms in scope',
  allow: 'signed-in',
  query: listQuery,
  answer: listOf(Room),
})
export const createRoom = contract({
  method: 'POST',
  path: '/rooms',
  summary: 'Add a room',
  allow: editors,
  body: z.strictObject({ ...roomFields, countDays: days.default(''), mode: RoomMode.default('as-before') }),
  answer: Room,
  status: 201,
})
export const updateRoom = contract({
  method: 'PATCH',
  path: '/rooms/:id',
  summary: 'Change or retire a room',
  allow: editors,
  params: idParams,
  body: z.strictObject({ ...roomFields, retired: z.boolean() }).partial(),
  answer: Room,
})

// Suppliers -------------------------------------------------------------------------------------------------------
const clock = z.string().regex(/^([01][0-9]|2[0-3]):[0-5][0-9]$/, 'a time such as 10:00')
const supplierFields = {
  code,
  name: text(120),
  email: z.union([z.email('not an e-mail address').max(200), z.literal('')]),
  kind: z.enum(['stores', 'outside']),
  /** Weekdays on which an order may be placed; empty is any working day. */
  orderDays: days,
  /** Empty: orders are taken at every moment. */
  cutOff: z.union([clock, z.literal('')]),
  /** Weekdays on which a delivery may come; empty is any working day. */
  arrivalDays: days,
  arrivalTime: clock,
  leadWorkingDays: wholeNumber(120),
  minimumOrder: z.number().min(0).max(1_000_000),
  leadTimeDays: z.number().min(0).max(365).nullable(),
  leadTimeSd: z.number().min(0).max(365).nullable(),
  /** Days on which it takes no orders and brings nothing; null is the hospital's. */
  calendarId: Id.nullable(),
}
export const Supplier = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  email: z.string(),
  kind: z.enum(['stores', 'outside']),
  orderDays: z.string(),
  cutOff: z.string(),
  arrivalDays: z.string(),
  arrivalTime: z.string(),
  leadWorkingDays: z.number(),
  minimumOrder: z.number(),
  leadTimeDays: z.number().nullable(),
  leadTimeSd: z.number().nullable(),
  calendarId: Id.nullable(),
  /** Deliveries whose time was seen, and their mean delay beyond the stated time, in days. */
  seen: z.object({ deliveries: z.number().int(), delayDays: z.number().nullable() }),
  retired: z.boolean(),
})
export type Supplier = z.infer<typeof Supplier>
export const listSuppliers = contract({
  method: 'GET',
  path: '/suppliers',
  summary: 'Suppliers',
  allow: editors,
  query: listQuery,
  answer: listOf(Supplier),
})
export const createSupplier = contract({
  method: 'POST',
  path: '/suppliers',
  summary: 'Add a supplier',
  allow: editors,
  body: z.strictObject({
    ...supplierFields,
    arrivalTime: clock.default('14:00'),
    leadTimeDays: supplierFields.leadTimeDays.default(null),
    leadTimeSd: supplierFields.leadTimeSd.default(null),
    calendarId: supplierFields.calendarId.default(null),
  }),
  answer: Supplier,
  status: 201,
})
export const updateSupplier = contract({
  method: 'PATCH',
  path: '/suppliers/:id',
  summary: 'Change or retire a supplier',
  allow: editors,
  params: idParams,
  body: z.strictObject({ ...supplierFields, retired: z.boolean() }).partial(),
  answer: Supplier,
})

// Items -----------------------------------------------------------------------------------------------------------
const gtin = z
  .string()
  .trim()
  .regex(/^([0-9]{8}|[0-9]{12,14})$/, 'a GTIN has 8, 12, 13 or 14 digits')
const itemFields = {
  code,
  name: text(120),
  /** The supplier's or full name, as printed on orders. */
  orderName: text(200),
  unitOfUse: text(30),
  /** UN/ECE Recommendation 20 unit code. */
  unitCode: z
    .string()
    .trim()
    .regex(/^[A-Z0-9]{2,3}$/, 'a UN/ECE Rec 20 code such as C62'),
  countUnit: text(30),
  /** The sentence that says how to count it. */
  countNote: z.string().trim().max(200),
  ved: Ved,
  category: z.string().trim().max(60),
  shelfLifeDays: wholeNumber(10_000).nullable(),
  minShelfDays: wholeNumber(10_000).nullable(),
  latex: z.boolean(),
  coldChain: z.boolean(),
  supplierId: Id.nullable(),
  supplierItem: z.string().trim().max(60),
  /** Of one unit of use, in the hospital's currency. */
  price: z.number().min(0).max(1_000_000).nullable(),
  orderUnit: text(30),
  unitsPerOrder: z.number().int('whole numbers only').min(1, 'at least 1').max(99_999),
  gtins: z.array(z.strictObject({ gtin, level: z.enum(['each', 'pack']) })).max(20),
  lookalikeIds: z.array(Id).max(20),
}
export const Item = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  orderName: z.string(),
  unitOfUse: z.string(),
  unitCode: z.string(),
  countUnit: z.string(),
  countNote: z.string(),
  ved: Ved,
  category: z.string(),
  shelfLifeDays: z.number().nullable(),
  minShelfDays: z.number().nullable(),
  latex: z.boolean(),
  coldChain: z.boolean(),
  supplierId: Id.nullable(),
  supplierName: z.string().nullable(),
  supplierItem: z.string(),
  price: z.number().nullable(),
  orderUnit: z.string(),
  unitsPerOrder: z.number(),
  gtins: z.array(z.object({ gtin: z.string(), level: z.enum(['each', 'pack']) })),
  lookalikeIds: z.array(Id),
  retired: z.boolean(),
})
export type Item = z.infer<typeof Item>
export const listItems = contract({
  method: 'GET',
  path: '/items',
  summary: 'Items',
  allow: [...editors, 'reviewer'],
  query: listQuery.extend({ ved: Ved.optional() }),
  answer: listOf(Item),
})
export const readItem = contract({
  method: 'GET',
  path: '/items/:id',
  summary: 'One item',
  allow: 'signed-in',
  params: idParams,
  answer: Item,
})
export const createItem = contract({
  method: 'POST',
  path: '/items',
  summary: 'Add an item',
  allow: editors,
  body: z.strictObject({
    ...itemFields,
    unitCode: itemFields.unitCode.default('C62'),
    countNote: itemFields.countNote.default(''),
    category: itemFields.category.default(''),
    shelfLifeDays: itemFields.shelfLifeDays.default(null),
    minShelfDays: itemFields.minShelfDays.default(null),
    latex: z.boolean().default(false),
    coldChain: z.boolean().default(false),
    supplierId: itemFields.supplierId.default(null),
    supplierItem: itemFields.supplierItem.default(''),
    price: itemFields.price.default(null),
    gtins: itemFields.gtins.default([]),
    lookalikeIds: itemFields.lookalikeIds.default([]),
  }),
  answer: Item,
  status: 201,
})
export const updateItem = contract({
  method: 'PATCH',
  path: '/items/:id',
  summary: 'Change or retire an item',
  allow: editors,
  params: idParams,
  body: z.strictObject({ ...itemFields, retired: z.boolean() }).partial(),
  answer: Item,
})

// Bins ------------------------------------------------------------------------------------------------------------
export const listBins = contract({
  method: 'GET',
  path: '/bins',
  summary: 'Bins in scope, in walking order',
  allow: 'signed-in',
  query: z.object({
    ...pageQuery,
    roomId: Id.optional(),
    state: z.enum(binStates).optional(),
    q: z.string().trim().max(100).optional(),
    code: z.string().trim().max(40).optional(),
    itemId: Id.optional(),
    ...retiredQuery,
  }),
  answer: listOf(Bin),
})
export const readBin = contract({
  method: 'GET',
  path: '/bins/:id',
  summary: 'One bin',
  allow: 'signed-in',
  params: idParams,
  answer: Bin,
})

const binFields = {
  roomId: Id,
  bay: z.string().trim().max(20),
  shelf: z.string().trim().max(20),
  walkOrder: wholeNumber(100_000),
  kind: z.enum(['counted', 'two-bin', 'fixed-set']),
  overflowOf: Id.nullable(),
  itemId: Id.nullable(),
  capacity: z.number().int().min(1).max(99_999).nullable(),
  /** Levels a person entered; used until there is enough history, or for good where the room is kept as before. */
  enteredReorderPoint: wholeNumber(99_999).nullable(),
  enteredPar: wholeNumber(99_999).nullable(),
}
export const createBin = contract({
  method: 'POST',
  path: '/bins',
  summary: 'Add a bin; without a code it gets a new label code',
  allow: editors,
  body: z.strictObject({
    ...binFields,
    code: z.string().trim().max(40).optional(),
    bay: binFields.bay.default(''),
    shelf: binFields.shelf.default(''),
    walkOrder: binFields.walkOrder.optional(),
    kind: binFields.kind.default('counted'),
    overflowOf: binFields.overflowOf.default(null),
    itemId: binFields.itemId.default(null),
    capacity: binFields.capacity.default(null),
    enteredReorderPoint: binFields.enteredReorderPoint.default(null),
    enteredPar: binFields.enteredPar.default(null),
  }),
  answer: Bin,
  status: 201,
})
export const updateBin = contract({
  method: 'PATCH',
  path: '/bins/:id',
  summary: 'Change, move, reassign or retire a bin',
  allow: editors,
  params: idParams,
  body: z.strictObject({ ...binFields, retired: z.boolean() }).partial(),
  answer: Bin,
})
