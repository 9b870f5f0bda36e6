import { batchLimit, type SyncAnswer, type SyncResult } from '#shared/contracts/counts.ts'
import { problem } from '#shared/contracts/problems.ts'
import { fold } from '#shared/ledger/fold.ts'
import { operationFlags } from '#shared/ledger/flags.ts'
import { operationRows } from '#shared/ledger/operation-rows.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { duplicateKey, isDuplicate, isRetryable, isUnreachable } from '../db/errors.ts'
import { inTransaction } from '../db/transaction.ts'
import type { Actor } from '../http/context.ts'
import { illFormedAt, wellFormed } from '../http/well-formed.ts'
import { enqueue } from '../jobs/jobs.service.ts'
import { payloadHash } from './canonical.ts'
import {
  closeQuarantine,
  countOpenQuarantine,
  closeRecounts,
  ensureRoomVersion,
  findLevel,
  findOperation,
  insertLevel,
  insertMovements,
  insertOperations,
  insertQuarantine,
  insertRecount,
  insertTombstone,
  listLedger,
  lockLevels,
  markBinsChanged,
  newestRecordedAt,
  raiseRoomVersion,
  roomsOfBins,
  seenDevice,
  updateLevel,
  type LevelRow,
  type MovementRow,
  type NewMovement,
} from './counts.repository.ts'
import { judge, readOperation, type End, type Judged } from './judge.ts'
import { NotYet, Refusal } from './refusal.ts'

interface Batch {
  deviceId: string
  userId: string
  appVersion: string
  items: unknown[]
}

/** Takes in a batch, each entry in a transaction of its own; answers after all of them are committed. */
export async function syncOperations(db: Db, clock: Clock, actor: Actor, batch: Batch): Promise<SyncAnswer> {
  if (batch.items.length > batchLimit) throw problem('batch-too-large')
  if (Number(batch.userId) !== actor.id) throw problem('owner-mismatch')
  await seenDevice(db, batch.deviceId, batch.appVersion, clock.now())
  const results: SyncResult[] = []
  for (const item of batch.items) results.push(await takeIn(db, clock, actor, batch, item))
  return { serverTime: clock.now().toISOString(), authzVersion: actor.authzVersion, results }
}

/** One entry → one result; nothing that goes wrong with it touches its neighbours. */
async function takeIn(db: Db, clock: Clock, actor: Actor, batch: Batch, sent: unknown): Promise<SyncResult> {
  const item = isRecord(sent) ? sent : { entry: sent }
  const opId = typeof item.opId === 'string' ? item.opId.toWellFormed().slice(0, 64) : ''
  const entry = { opId, hash: payloadHash(item), item }
  const now = clock.now()
  try {
    try {
      return await decide(db, now, actor, batch, entry)
    } catch (error) {
      if (!(error instanceof Refusal)) throw error
      return await refuse(db, now, actor, batch, entry, error)
    }
  } catch (error) {
    return notTaken(opId, error)
  }
}

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value)

/** What was not taken in stays on the phone. One entry's fault never becomes its neighbours'. */
function notTaken(opId: string, error: unknown): SyncResult {
  if (error instanceof NotYet) return { opId, status: 'retry', code: error.code, message: error.message }
  const again = 'It stays on the phone and is sent again by itself.'
  if (isRetryable(error)) return { opId, status: 'retry', code: 'busy', message: `The record is busy. ${again}` }
  // Without a database nothing of the batch can be taken in: the whole call says so.
  if (isUnreachable(error)) throw error
  process.stderr.write(
    `Entry ${opId} could not be taken in: ${error instanceof Error ? error.message : String(error)}\n`,
  )
  return { opId, status: 'retry', code: 'internal', message: `The record could not take this in. ${again}` }
}

interface Entry {
  opId: string
  hash: string
  item: Record<string, unknown>
}

async function decide(db: Db, now: Date, actor: Actor, batch: Batch, entry: Entry): Promise<SyncResult> {
  const known = entry.opId ? await findOperation(db, entry.opId) : null
  if (known) return repeated(known, entry.hash, actor)
  if (illFormedAt(entry.item) !== null) {
    throw new Refusal('invalid-operation', 'A text holds a broken character: type it anew.', true)
  }
  const operation = readOperation(entry.item)
  try {
    const { flags } = await inTransaction(db, async (tx) =>
      record(tx, now, actor, batch, await judge(tx, actor, operation, now), entry),
    )
    const conflict = flags.some((f) => f !== 'clock-suspect')
    const status = conflict ? 'accepted_with_conflict' : 'accepted'
    return { opId: entry.opId, status, ...(flags.length ? { flags } : {}) }
  } catch (error) {
    // Two requests carried the same entry at once: the other one wrote it.
    const same = isDuplicate(error) && duplicateKey(error).includes('operations_op')
    const other = same ? await findOperation(db, entry.opId) : null
    if (!other) throw error
    return repeated(other, entry.hash, actor)
  }
}

interface KnownOperation {
  opId: string
  payloadHash: string
  userId: number
  flags: string[]
}

/** The same entry again is a duplicate; another entry under its number is refused. @throws {Refusal} key-reuse */
function repeated(known: KnownOperation, hash: string, actor: Actor): SyncResult {
  if (known.payloadHash !== hash || known.userId !== actor.id) {
    throw new Refusal('key-reuse', 'Another entry has this number already.', false)
  }
  return { opId: known.opId, status: 'duplicate', ...(known.flags.length ? { flags: known.flags } : {}) }
}

async function refuse(
  db: Db,
  now: Date,
  actor: Actor,
  batch: Batch,
  entry: Entry,
  refusal: Refusal,
): Promise<SyncResult> {
  await insertQuarantine(db, {
    opId: entry.opId || entry.hash.slice(0, 36),
    payloadHash: entry.hash,
    payload: wellFormed(entry.item),
    userId: actor.id,
    deviceId: batch.deviceId,
    code: refusal.code,
    message: refusal.message,
    receivedAt: now,
  })
  return {
    opId: entry.opId,
    status: 'rejected',
    code: refusal.code,
    message: refusal.message,
    fixable: refusal.fixable,
  }
}

/** Writes one judged entry: lock, insert, fold, audit, version, job. */
async function record(
  tx: Tx,
  now: Date,
  actor: Actor,
  batch: { deviceId: string; appVersion: string },
  judged: Judged,
  received: Entry,
): Promise<{ flags: string[] }> {
  const { operation } = judged
  const ends = judged.other ? [judged.end, judged.other] : [judged.end]
  const [level] = (
    await lockLevels(
      tx,
      ends.map((e) => e.binId),
    )
  ).filter((l) => l.binId === judged.end.binId)
  checkRelease(operation, level)
  const rows = movementRows(judged, { now, userId: actor.id, deviceId: batch.deviceId })
  const flags = [...judged.flags, ...(await flagsWith(tx, judged.end, rows))]
  for (const row of rows) row.flags = flags
  await insertOperations(tx, [
    {
      opId: operation.opId,
      payloadHash: received.hash,
      type: operation.type,
      version: operation.v,
      payload: received.item,
      binId: judged.end.binId,
      userId: actor.id,
      deviceId: batch.deviceId,
      localSeq: operation.localSeq,
      appVersion: batch.appVersion,
      receivedAt: now,
      effectiveAt: judged.effectiveAt,
      flags,
    },
  ])
  await insertMovements(tx, rows)
  for (const end of ends) await refold(tx, now, end.binId)
  await settle(tx, now, judged, flags)
  await closeQuarantine(tx, operation.opId, now)
  if (judged.attention) await openAttentionFor(tx, now, actor, batch, judged.attention, received)
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: operation.type,
    subject: 'bin',
    subjectId: judged.end.binId,
    after: { opId: operation.opId },
  })
  await touchBins(
    tx,
    now,
    ends.map((e) => e.binId),
    'count',
  )
  return { flags }
}

/** Taken in, and a person of that ward has to look at the rest. */
async function openAttentionFor(
  tx: Tx,
  now: Date,
  actor: Actor,
  batch: { deviceId: string },
  message: string,
  received: Entry,
): Promise<void> {
  await insertQuarantine(tx, {
    opId: received.opId,
    payloadHash: received.hash,
    payload: received.item,
    userId: actor.id,
    deviceId: batch.deviceId,
    code: 'no-place-there',
    message,
    receivedAt: now,
  })
}

/** Only what is held can be given back. */
function checkRelease(operation: Judged['operation'], level: LevelRow | undefined): void {
  if (operation.type !== 'release' || operation.quantity <= (level?.held ?? 0)) return
  throw new Refusal('invalid-operation', `quantity: only ${level?.held ?? 0} are held here`, true)
}

async function settle(tx: Tx, now: Date, judged: Judged, flags: string[]): Promise<void> {
  if (judged.operation.type !== 'count') return
  await closeRecounts(tx, judged.end.binId, judged.operation.opId, now)
  if (!flags.includes('count-differs')) return
  await insertRecount(tx, {
    binId: judged.end.binId,
    opId: judged.operation.opId,
    cause: 'count-differs',
    createdAt: now,
  })
}

/** Ledger rows of a judged entry. */
export function movementRows(judged: Judged, by: { now: Date; userId: number; deviceId: string }): NewMovement[] {
  const { operation } = judged
  const rows = operationRows(operation, judged.targetEnds).filter((row) => row.end === 'bin' || judged.other !== null)
  return rows.map((row) => {
    const end = row.end === 'bin' ? judged.end : (judged.other ?? judged.end)
    return {
      opId: operation.opId,
      part: row.part,
      binId: end.binId,
      assignmentId: end.assignmentId,
      itemId: end.itemId,
      roomId: end.roomId,
      type: row.type,
      quantity: row.quantity,
      effectiveAt: judged.effectiveAt,
      statedAt: judged.statedAt,
      recordedAt: by.now,
      userId: by.userId,
      deviceId: by.deviceId,
      localSeq: operation.localSeq,
      reason: 'reason' in operation ? (operation.reason ?? null) : null,
      targetOpId: 'targetOpId' in operation ? operation.targetOpId : null,
      orderLineId:
        'orderLineId' in operation && operation.orderLineId !== undefined ? Number(operation.orderLineId) : null,
      lot: 'lot' in operation ? (operation.lot ?? null) : null,
      expiry: 'expiry' in operation ? (operation.expiry ?? null) : null,
      flags: judged.flags,
    }
  })
}

/** Stored rows carry dates; the fold works on milliseconds. */
export const toLedgerRow = (
  row: Pick<
    MovementRow,
    | 'opId'
    | 'part'
    | 'type'
    | 'quantity'
    | 'effectiveAt'
    | 'statedAt'
    | 'deviceId'
    | 'localSeq'
    | 'targetOpId'
    | 'flags'
    | 'userId'
  >,
) => ({
  opId: row.opId,
  part: row.part,
  type: row.type,
  quantity: row.quantity,
  effectiveAt: row.effectiveAt.getTime(),
  statedAt: row.statedAt.getTime(),
  deviceId: row.deviceId,
  localSeq: row.localSeq,
  targetOpId: row.targetOpId,
  flags: row.flags,
  userId: row.userId,
})

async function flagsWith(tx: Tx, end: End, added: NewMovement[]): Promise<string[]> {
  const before = await listLedger(tx, end.binId, end.assignmentId)
  const mine = added.filter((r) => r.binId === end.binId && r.assignmentId === end.assignmentId)
  const rows = [
    ...before.map(toLedgerRow),
    ...mine.map((r) => toLedgerRow({ ...r, targetOpId: r.targetOpId ?? null, flags: [] })),
  ]
  return operationFlags(fold(rows), added[0]?.opId ?? '', end.packSize)
}

/** Folds the ledger of a bin's present assignment into its level row; the caller holds its lock. */
export async function refold(tx: Tx, now: Date, binId: number): Promise<void> {
  const [level] = await lockLevels(tx, [binId])
  if (!level) return
  const rows = level.assignmentId === null ? [] : await listLedger(tx, binId, level.assignmentId)
  await updateLevel(tx, binId, levelOf(rows, now))
}

/** The level row a ledger folds to; also what `npm run rebuild` compares with. */
export function levelOf(rows: MovementRow[], now: Date) {
  const folded = fold(rows.map(toLedgerRow))
  return {
    onHand: folded.onHand,
    held: folded.held,
    lastCountQuantity: folded.lastCount?.quantity ?? null,
    lastCountAt: folded.lastCount ? new Date(folded.lastCount.effectiveAt) : null,
    lastCountOpId: folded.lastCount?.opId ?? null,
    foldedAt: now,
  }
}

/**
 * Says that something a phone shows of these bins changed: raises their rooms' versions and, with a cause,
 * asks for their policies to be looked at again.
 */
export async function touchBins(tx: Tx, now: Date, binIds: number[], cause: string | null): Promise<void> {
  const places = await roomsOfBins(tx, binIds)
  const rooms = [...new Set(places.map((p) => p.roomId))].sort((a, b) => a - b)
  for (const roomId of rooms) {
    const version = await raiseRoomVersion(tx, roomId)
    await markBinsChanged(
      tx,
      places.filter((p) => p.roomId === roomId).map((p) => p.binId),
      version,
    )
  }
  if (cause === null) return
  for (const binId of binIds) await enqueue(tx, now, 'policy-bin', { binId, cause }, `policy-bin-${binId}-${cause}`)
}

/** The ledger of one assignment of a bin, folded, for those who compute on; `until` leaves out what counts later. */
export async function foldedLedger(db: Reader, binId: number, assignmentId: number | null, until: Date | null = null) {
  const all = await listLedger(db, binId, assignmentId)
  const rows = until === null ? all : all.filter((r) => r.effectiveAt <= until)
  return { rows, folded: fold(rows.map(toLedgerRow)) }
}

// For the catalogue -----------------------------------------------------------------------------------------------

/** A room's version row, made with the room. */
export const startRoom = (tx: Tx, roomId: number): Promise<void> => ensureRoomVersion(tx, roomId)

/** A bin's level row, made with the bin: a missing row could not be locked. */
export async function startLevel(tx: Tx, binId: number, roomId: number): Promise<void> {
  await insertLevel(tx, { binId, roomId, assignmentId: null, onHand: 0, held: 0, roomVersion: 0 })
}

/** The bin's level follows its present assignment. */
export async function takeAssignment(tx: Tx, now: Date, binId: number, assignmentId: number | null): Promise<void> {
  await lockLevels(tx, [binId])
  await updateLevel(tx, binId, { assignmentId })
  await refold(tx, now, binId)
}

/** A bin left a room or was retired: phones that keep the old room drop it at their next sync. */
export async function leaveRoom(tx: Tx, binId: number, fromRoomId: number, toRoomId: number): Promise<void> {
  await updateLevel(tx, binId, { roomId: toRoomId })
  await insertTombstone(tx, fromRoomId, binId, await raiseRoomVersion(tx, fromRoomId))
}

/** When the ledger was last written. */
export const newestRecord = newestRecordedAt

/** Entries that could not be taken in and that nobody has settled. */
export const openAttention = countOpenQuarantine

/** Takes the locks of these bins, in the one order everybody keeps. */
export async function lockBins(tx: Tx, binIds: number[]): Promise<void> {
  await lockLevels(tx, binIds)
}

/** What differs between a stored level and a fresh fold, or null. */
export async function levelDifference(db: Reader, binId: number): Promise<string | null> {
  const level = await findLevel(db, binId)
  if (!level) return 'no level is stored'
  const rows = level.assignmentId === null ? [] : await listLedger(db, binId, level.assignmentId)
  const { foldedAt: _moment, ...fresh } = levelOf(rows, new Date(0))
  const { onHand, held, lastCountQuantity, lastCountAt, lastCountOpId } = level
  const stored = { onHand, held, lastCountQuantity, lastCountAt, lastCountOpId }
  const same = JSON.stringify(stored) === JSON.stringify(fresh)
  return same ? null : `the stored level is ${JSON.stringify(stored)}, the ledger gives ${JSON.stringify(fresh)}`
}
