import { fold } from '#shared/ledger/fold.ts'
import type { Reader, Tx } from '../db/client.ts'
import { enqueue } from '../jobs/jobs.service.ts'
import {
  countOpenQuarantine,
  ensureRoomVersion,
  findLevel,
  insertLevel,
  insertTombstone,
  listLedger,
  lockLevels,
  markBinsChanged,
  newestRecordedAt,
  raiseRoomVersion,
  roomsOfBins,
  updateLevel,
  type MovementRow,
} from './counts.repository.ts'

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

/**
 * Takes the locks of these bins, in the one order everybody keeps.
 * @returns when the ledger of one of them was last folded, epoch ms: what was read before that may be stale
 */
export async function lockBins(tx: Tx, binIds: number[]): Promise<number> {
  const rows = await lockLevels(tx, binIds)
  return Math.max(0, ...rows.map((row) => row.foldedAt?.getTime() ?? 0))
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
