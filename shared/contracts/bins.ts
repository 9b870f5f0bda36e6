import { z } from 'zod'
import { contract, Id, idParams, Instant, listOf, pageQuery, Role } from './contract.ts'

/** States are predicates; several hold at once. */
export const binStates = [
  'below',
  'ok',
  'empty',
  'never-counted',
  'count-first',
  'count-overdue',
  'on-order',
  'late-order',
  'held',
] as const
export type BinState = (typeof binStates)[number]

export const BinItem = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  unitOfUse: z.string(),
  countUnit: z.string(),
  ved: z.enum(['V', 'E', 'D']),
})

/** A bin with everything a list shows of it. Quantities are whole units of use. */
export const Bin = z.object({
  id: Id,
  code: z.string(),
  /** The code as printed, with its hyphen. */
  display: z.string(),
  kind: z.enum(['counted', 'two-bin', 'fixed-set']),
  overflowOf: Id.nullable(),
  roomId: Id,
  roomName: z.string(),
  itemId: Id.nullable(),
  item: BinItem.nullable(),
  bay: z.string(),
  shelf: z.string(),
  walkOrder: z.number().int(),
  capacity: z.number().int().nullable(),
  packSize: z.number().int(),
  orderUnit: z.string(),
  onHand: z.number().int(),
  held: z.number().int(),
  onOrder: z.number().int(),
  arrived: z.number().int(),
  position: z.number().int(),
  lastCount: z.object({ quantity: z.number().int(), effectiveAt: Instant }).nullable(),
  reorderPoint: z.number().int().nullable(),
  parLevel: z.number().int().nullable(),
  under: z.number().int(),
  states: z.array(z.enum(binStates)),
  /** Days the room plans between counts. */
  countEveryDays: z.number(),
  /** When the next believed delivery of this item for this bin should come. */
  expectedOn: z.string().nullable(),
  /** The place is shut for a planned time: no counts are due and nothing is flagged until then. */
  closed: z.object({ from: Instant, until: Instant.nullable() }).nullable(),
  /** A holiday gap is near: what should stand here by the last order before it (an estimate). */
  gap: z.object({ level: z.number().int(), orderBy: Instant, name: z.string() }).nullable(),
  /** The ledger folds below zero: records disagree, count it. */
  recordsDisagree: z.boolean(),
  enteredReorderPoint: z.number().int().nullable(),
  enteredPar: z.number().int().nullable(),
  retired: z.boolean(),
})
export type Bin = z.infer<typeof Bin>

export const movementTypes = [
  'count',
  'receipt',
  'transfer-in',
  'transfer-out',
  'wastage',
  'take',
  'hold',
  'release',
  'adjust',
  'arrival',
  'signal',
  'flag',
  'withdraw',
] as const
export type MovementType = (typeof movementTypes)[number]

export const Movement = z.object({
  id: Id,
  opId: z.string(),
  type: z.enum(movementTypes),
  quantity: z.number().int(),
  onHandAfter: z.number().int(),
  itemId: Id,
  effectiveAt: Instant,
  recordedAt: Instant,
  /** Person id, or null where the reader may only see the role. */
  by: Id.nullable(),
  byName: z.string().nullable(),
  byRole: Role.nullable(),
  deviceId: z.string(),
  reason: z.string().nullable(),
  targetOpId: z.string().nullable(),
  voidedBy: z.string().nullable(),
  flags: z.array(z.string()),
})
export type Movement = z.infer<typeof Movement>

export const listMovements = contract({
  method: 'GET',
  path: '/bins/:id/movements',
  summary: 'The ledger of one bin, newest first',
  allow: 'signed-in',
  params: idParams,
  query: z.object(pageQuery),
  answer: listOf(Movement),
})
