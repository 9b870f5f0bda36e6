import { batchLimit, type SyncAnswer, type SyncResult } from '#shared/contracts/counts.ts'
import { problem } from '#shared/contracts/problems.ts'
import { fold } from '#shared/ledger/fold.ts'
import { operationFlags } from '#shared/ledger/flags.ts'
import { operationRows } from '#shared/ledger/operation-rows.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import type { Db, Tx } from '../db/client.ts'
import { duplicateKey, isDuplicate, isRetryable, isUnreachable } from '../db/errors.ts'
import { inTransaction } from '../db/transaction.ts'
import type { Actor } from '../http/context.ts'
import { illFormedAt, wellFormed } from '../http/well-formed.ts'
import { observeEntry } from '../replenishment/lead-times.service.ts'
import { payloadHash } from './canonical.ts'
import {
  closeQuarantine,
  closeRecounts,
  findOperation,
  insertMovements,
  insertOperations,
  insertQuarantine,
  insertRecount,
  listLedger,
  lockLevels,
  seenDevice,
  type LevelRow,
  type NewMovement,
} from './counts.repository.ts'
import { toLedgerRow, refold, touchBins } from './levels.service.ts'
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
  await observeEntry(tx, operation)
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

async function flagsWith(tx: Tx, end: End, added: NewMovement[]): Promise<string[]> {
  const before = await listLedger(tx, end.binId, end.assignmentId)
  const mine = added.filter((r) => r.binId === end.binId && r.assignmentId === end.assignmentId)
  const rows = [
    ...before.map(toLedgerRow),
    ...mine.map((r) => toLedgerRow({ ...r, targetOpId: r.targetOpId ?? null, flags: [] })),
  ]
  return operationFlags(fold(rows), added[0]?.opId ?? '', end.packSize)
}
