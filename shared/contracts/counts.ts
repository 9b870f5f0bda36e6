import { z } from 'zod'
import { Bin } from './bins.ts'
import { contract, Id, Instant, OpId, Quantity } from './contract.ts'

const optionalText = (max: number) => z.string().max(max).optional()

const every = {
  opId: OpId,
  v: z.number().int().min(1).max(1000),
  localSeq: z.number().int().min(0),
  binId: Id.optional(),
  binCode: z.string().max(40).optional(),
  deviceTime: Instant,
  estTime: Instant.optional(),
  /** A time a person states, for a sheet typed in later; up to 7 days back. */
  observedAt: Instant.optional(),
  observedSource: z.enum(['typed-sheet']).optional(),
  itemId: Id.optional(),
  tz: optionalText(64),
  lastContact: Instant.nullable().optional(),
  clockOffsetMs: z.number().int().nullable().optional(),
  offsetErrMs: z.number().int().min(0).nullable().optional(),
  /** What the person saw when deciding, e.g. the room version and the last count shown. */
  basis: z.record(z.string(), z.union([z.string().max(100), z.number(), z.null()])).optional(),
  note: optionalText(300),
}
const reason = z.string().trim().min(1).max(200)

/** One entry of the outbox, as sent. Strict: a field that is not listed is refused. */
export const Operation = z
  .discriminatedUnion(
    'type',
    [
      z.strictObject({ ...every, type: z.literal('count'), quantity: Quantity }),
      z.strictObject({
        ...every,
        type: z.literal('count.correct'),
        targetOpId: OpId,
        quantity: Quantity,
        reason: reason.optional(),
      }),
      z.strictObject({ ...every, type: z.literal('count.withdraw'), targetOpId: OpId, reason: reason.optional() }),
      z.strictObject({ ...every, type: z.literal('movement.withdraw'), targetOpId: OpId, reason: reason.optional() }),
      z.strictObject({
        ...every,
        type: z.literal('receipt'),
        quantity: Quantity,
        orderLineId: Id.optional(),
        lot: optionalText(40),
        expiry: z.iso.date().optional(),
        reason: reason.optional(),
      }),
      z.strictObject({ ...every, type: z.literal('arrival'), orderLineId: Id, quantity: Quantity }),
      z.strictObject({
        ...every,
        type: z.literal('transfer'),
        quantity: Quantity,
        direction: z.enum(['out', 'in']),
        toBinId: Id.optional(),
        toBinCode: z.string().max(40).optional(),
        toRoomId: Id.optional(),
      }),
      z.strictObject({ ...every, type: z.literal('wastage'), quantity: Quantity, reason }),
      z.strictObject({ ...every, type: z.literal('take'), quantity: Quantity }),
      z.strictObject({ ...every, type: z.literal('hold'), quantity: Quantity, lot: optionalText(40), reason }),
      z.strictObject({ ...every, type: z.literal('release'), quantity: Quantity, lot: optionalText(40), reason }),
      z.strictObject({ ...every, type: z.literal('signal') }),
      z.strictObject({ ...every, type: z.literal('flag'), reason }),
    ],
    { error: 'this kind of entry is not known here' },
  )
  .refine((o) => Boolean(o.binId) || Boolean(o.binCode) || o.type === 'arrival', {
    path: ['binId'],
    message: 'name the bin by id or code',
  })
export type Operation = z.infer<typeof Operation>
export type OperationType = Operation['type']

/** Most items in one batch. */
export const batchLimit = 100

export const syncStatuses = ['accepted', 'duplicate', 'accepted_with_conflict', 'rejected', 'retry'] as const
export const SyncResult = z.object({
  opId: z.string(),
  status: z.enum(syncStatuses),
  code: z.string().optional(),
  message: z.string().optional(),
  fixable: z.boolean().optional(),
  flags: z.array(z.string()).optional(),
})
export type SyncResult = z.infer<typeof SyncResult>

export const SyncBody = z.strictObject({
  deviceId: z.string().min(1).max(64),
  userId: Id,
  appVersion: z.string().max(40),
  sentAt: Instant,
  /** At most 100 (more is 413). Judged one by one: a malformed item is refused alone. */
  items: z.array(z.unknown()),
})
export const SyncAnswer = z.object({
  serverTime: Instant,
  authzVersion: z.number().int(),
  results: z.array(SyncResult),
})
export type SyncAnswer = z.infer<typeof SyncAnswer>

export const syncOperations = contract({
  method: 'POST',
  path: '/sync/operations',
  summary: 'Bring entries made on a phone into the record',
  allow: ['nurse', 'coordinator'],
  body: SyncBody,
  answer: SyncAnswer,
  judgesEntries: true,
})

/** What a phone needs of an item to count it. */
export const SnapshotItem = z.object({
  id: Id,
  code: z.string(),
  name: z.string(),
  unitOfUse: z.string(),
  countUnit: z.string(),
  countNote: z.string(),
  ved: z.enum(['V', 'E', 'D']),
  orderUnit: z.string(),
  packSize: z.number().int(),
  lookalikes: z.array(z.string()),
})
export type SnapshotItem = z.infer<typeof SnapshotItem>

/** What a phone needs of a policy: the figures in force, and the input to work them out again. */
export const SnapshotPolicy = z.object({
  binId: Id,
  reorderPoint: z.number().int().nullable(),
  parLevel: z.number().int().nullable(),
  meanPerDay: z.number().nullable(),
  variancePerDay: z.number().nullable(),
  input: z.unknown(),
})
export type SnapshotPolicy = z.infer<typeof SnapshotPolicy>

/** Lines of open orders that may arrive for a bin, for the question after an unexplained rise. */
export const SnapshotOpenLine = z.object({
  orderLineId: Id,
  orderNumber: z.string(),
  binId: Id,
  /** Still to come: ordered less put away less cancelled. */
  units: z.number().int(),
  putAway: z.number().int(),
  expectedOn: z.string().nullable(),
})

export const Caution = z.object({
  /** `vital-policy`, `look-alike`, `latex`, `cold-chain`, … */
  kind: z.string(),
  itemId: Id.nullable(),
  text: z.string(),
  link: z.string().nullable(),
})

export const Snapshot = z.object({
  roomId: Id,
  version: z.number().int(),
  reset: z.boolean(),
  bins: z.array(Bin),
  items: z.array(SnapshotItem),
  barcodes: z.array(z.object({ gtin: z.string(), itemId: Id, level: z.enum(['each', 'pack']) })),
  cautions: z.array(Caution),
  holds: z.array(z.object({ binId: Id, quantity: z.number().int(), reason: z.string().nullable() })),
  policies: z.array(SnapshotPolicy),
  openLines: z.array(SnapshotOpenLine),
  tombstones: z.array(Id),
  authzVersion: z.number().int(),
  serverTime: Instant,
})
export type Snapshot = z.infer<typeof Snapshot>

export const readSnapshot = contract({
  method: 'GET',
  path: '/sync/snapshot',
  summary: 'All a phone keeps of one room, or what changed since a version',
  allow: ['nurse', 'coordinator'],
  query: z.object({ roomId: Id, since: z.coerce.number().int().min(0).optional() }),
  answer: Snapshot,
})
