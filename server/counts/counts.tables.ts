import { bigint, boolean, date, index, int, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, jsonOf, ref } from '../db/columns.ts'
import type { MovementType } from '#shared/contracts/bins.ts'

/** Entries as received. Append-only; the op id is unique for ever. */
export const operations = mysqlTable(
  'operations',
  {
    id: id(),
    opId: varchar({ length: 36 }).notNull(),
    payloadHash: varchar({ length: 64 }).notNull(),
    type: varchar({ length: 20 }).notNull(),
    version: int().notNull(),
    payload: jsonOf<unknown>().notNull(),
    binId: ref(),
    userId: ref().notNull(),
    deviceId: varchar({ length: 64 }).notNull(),
    localSeq: bigint({ mode: 'number' }).notNull(),
    appVersion: varchar({ length: 40 }).notNull(),
    receivedAt: instant().notNull(),
    effectiveAt: instant().notNull(),
    flags: jsonOf<string[]>().notNull(),
  },
  (t) => [unique('operations_op').on(t.opId), index('operations_bin').on(t.binId, t.receivedAt)],
)

/** The ledger. Append-only; a correction or withdrawal is a new row that names the old one. */
export const movements = mysqlTable(
  'movements',
  {
    id: id(),
    opId: varchar({ length: 36 }).notNull(),
    /** 0 for the row of the bin counted; 1 for the other end of a transfer. */
    part: int().notNull(),
    binId: ref().notNull(),
    assignmentId: ref().notNull(),
    itemId: ref().notNull(),
    roomId: ref().notNull(),
    type: varchar({ length: 16 }).$type<MovementType>().notNull(),
    /** Found for a count, the signed change for the rest. */
    quantity: int().notNull(),
    /** When it counts; a correction takes its target's. */
    effectiveAt: instant().notNull(),
    /** When it was stated: decides between two corrections of one count. */
    statedAt: instant().notNull(),
    recordedAt: instant().notNull(),
    userId: ref().notNull(),
    deviceId: varchar({ length: 64 }).notNull(),
    localSeq: bigint({ mode: 'number' }).notNull(),
    reason: varchar({ length: 200 }),
    targetOpId: varchar({ length: 36 }),
    orderLineId: ref(),
    lot: varchar({ length: 40 }),
    expiry: date({ mode: 'string' }),
    flags: jsonOf<string[]>().notNull(),
  },
  (t) => [
    unique('movements_op_part').on(t.opId, t.part),
    index('movements_bin').on(t.binId, t.effectiveAt),
    index('movements_target').on(t.targetOpId),
    index('movements_order_line').on(t.orderLineId),
  ],
)

/** Projection: equals a fresh fold of the ledger. Created with the bin, so that it can always be locked. */
export const binLevels = mysqlTable(
  'bin_levels',
  {
    binId: ref().primaryKey(),
    roomId: ref().notNull(),
    assignmentId: ref(),
    /** Raw: may fold below zero. */
    onHand: int().notNull(),
    held: int().notNull(),
    lastCountQuantity: int(),
    lastCountAt: instant(),
    lastCountOpId: varchar({ length: 36 }),
    /** Room version at which anything a phone shows of this bin last changed. */
    roomVersion: int().notNull(),
    foldedAt: instant(),
  },
  (t) => [index('bin_levels_room').on(t.roomId, t.roomVersion)],
)

export const roomVersions = mysqlTable('room_versions', {
  roomId: ref().primaryKey(),
  version: int().notNull(),
  /** A phone that knows less than this has to start over. */
  resetBefore: int().notNull(),
})

export const roomTombstones = mysqlTable(
  'room_tombstones',
  { id: id(), roomId: ref().notNull(), binId: ref().notNull(), roomVersion: int().notNull() },
  (t) => [index('room_tombstones_room').on(t.roomId, t.roomVersion)],
)

/** Entries that could not be judged in: kept here so that nothing exists on one phone only. */
export const quarantine = mysqlTable(
  'quarantine',
  {
    id: id(),
    opId: varchar({ length: 64 }).notNull(),
    payloadHash: varchar({ length: 64 }).notNull(),
    payload: jsonOf<unknown>().notNull(),
    userId: ref().notNull(),
    deviceId: varchar({ length: 64 }).notNull(),
    code: varchar({ length: 40 }).notNull(),
    message: varchar({ length: 300 }).notNull(),
    receivedAt: instant().notNull(),
    closedAt: instant(),
  },
  (t) => [unique('quarantine_op').on(t.opId, t.payloadHash), index('quarantine_open').on(t.closedAt)],
)

export const recountTasks = mysqlTable(
  'recount_tasks',
  {
    id: id(),
    binId: ref().notNull(),
    opId: varchar({ length: 36 }).notNull(),
    cause: varchar({ length: 40 }).notNull(),
    createdAt: instant().notNull(),
    closedAt: instant(),
  },
  (t) => [index('recount_tasks_bin').on(t.binId, t.closedAt), unique('recount_tasks_op').on(t.opId)],
)

export const devices = mysqlTable('devices', {
  deviceId: varchar({ length: 64 }).primaryKey(),
  firstSeenAt: instant().notNull(),
  lastSeenAt: instant().notNull(),
  appVersion: varchar({ length: 40 }).notNull(),
  isRetired: boolean().notNull().default(false),
})
