import type { Operation } from '#shared/contracts/counts.ts'
import { fold } from '#shared/ledger/fold.ts'
import { operationFlags } from '#shared/ledger/flags.ts'
import { audit } from '../audit/audit.service.ts'
import type { Db, Tx } from '../db/client.ts'
import { groupBy } from './bin-view.service.ts'
import { payloadHash } from './canonical.ts'
import {
  closeRecounts,
  insertMovements,
  insertOperations,
  insertRecount,
  listLedger,
  lockLevels,
  seenDevice,
  type NewMovement,
} from './counts.repository.ts'
import { movementRows } from './counts.service.ts'
import { refold, toLedgerRow, touchBins } from './levels.service.ts'
import type { End } from './judge.ts'

/** One entry as it was received and judged, for those who bring in many at once. */
export interface BulkEntry {
  operation: Operation
  userId: number
  deviceId: string
  appVersion: string
  end: End
  other: End | null
  receivedAt: Date
  effectiveAt: Date
}

/**
 * Writes many entries as if each had been received on its own: operations, ledger, flags, recounts and audit; levels
 * are folded once for each bin, and room versions rise once. Policies are the caller's to look at.
 *
 * Withdrawals are not taken: nothing that comes in bulk takes anything back.
 *
 * @param entries in the order in which they were received
 */
export async function recordInBulk(tx: Tx, now: Date, entries: readonly BulkEntry[]): Promise<void> {
  if (entries.length === 0) return
  const ends = entries.flatMap((e) => (e.other ? [e.end, e.other] : [e.end]))
  const binIds = [...new Set(ends.map((e) => e.binId))].sort((a, b) => a - b)
  await lockLevels(tx, binIds)
  const written = entries.map((entry) => ({ entry, rows: rowsOf(entry), flags: [] as string[] }))
  await flagAll(tx, written)
  await insertOperations(
    tx,
    written.map(({ entry, flags }) => ({
      opId: entry.operation.opId,
      payloadHash: payloadHash(entry.operation),
      type: entry.operation.type,
      version: entry.operation.v,
      payload: entry.operation,
      binId: entry.end.binId,
      userId: entry.userId,
      deviceId: entry.deviceId,
      localSeq: entry.operation.localSeq,
      appVersion: entry.appVersion,
      receivedAt: entry.receivedAt,
      effectiveAt: entry.effectiveAt,
      flags,
    })),
  )
  await insertMovements(
    tx,
    written.flatMap((w) => w.rows),
  )
  await askAgain(tx, written)
  await audit(
    tx,
    ...entries.map((entry) => ({
      at: entry.receivedAt,
      userId: entry.userId,
      action: entry.operation.type,
      subject: 'bin',
      subjectId: entry.end.binId,
      after: { opId: entry.operation.opId },
    })),
  )
  for (const binId of binIds) await refold(tx, now, binId)
  await touchBins(tx, now, binIds, null)
}

interface Written {
  entry: BulkEntry
  rows: NewMovement[]
  flags: string[]
}

function rowsOf(entry: BulkEntry): NewMovement[] {
  const { operation, end, other, effectiveAt } = entry
  const judged = {
    operation,
    end,
    other,
    effectiveAt,
    statedAt: effectiveAt,
    flags: [],
    targetEnds: ['bin' as const],
    attention: null,
  }
  return movementRows(judged, { now: entry.receivedAt, userId: entry.userId, deviceId: entry.deviceId })
}

/** A flag looks at its neighbours in time; the fold over this many rows before and a count to stand on is enough. */
const neighbours = 24

type FoldRow = ReturnType<typeof toLedgerRow>

/** Each entry is flagged by the ledger as it was when it was received. */
async function flagAll(tx: Tx, written: Written[]): Promise<void> {
  for (const [binId, own] of groupBy(written, (w) => w.entry.end.binId)) {
    const ledgers = new Map<number, FoldRow[]>()
    for (const { entry, rows, flags } of own) {
      const { assignmentId, packSize } = entry.end
      const ledger = ledgers.get(assignmentId) ?? (await listLedger(tx, binId, assignmentId)).map(toLedgerRow)
      ledgers.set(assignmentId, ledger)
      for (const row of rows) if (row.binId === binId) add(ledger, row)
      flags.push(...operationFlags(fold(recent(ledger)), entry.operation.opId, packSize))
      for (const row of rows) row.flags = flags
    }
  }
}

/** Keeps the ledger in effective order; entries come nearly in that order, so the place is near the end. */
function add(ledger: FoldRow[], row: NewMovement): void {
  const fresh = toLedgerRow({ ...row, targetOpId: row.targetOpId ?? null, flags: [] })
  let at = ledger.length
  while (at > 0 && ledger[at - 1]!.effectiveAt > fresh.effectiveAt) at -= 1
  ledger.splice(at, 0, fresh)
}

function recent(ledger: FoldRow[]): FoldRow[] {
  let start = Math.max(0, ledger.length - neighbours)
  while (start > 0 && (ledger[start]!.type !== 'count' || ledger[start]!.targetOpId !== null)) start -= 1
  return ledger.slice(start)
}

/** Two counts that disagree ask for a third; a later count of the bin settles it. */
async function askAgain(tx: Tx, written: readonly Written[]): Promise<void> {
  for (const [i, { entry, flags }] of written.entries()) {
    if (entry.operation.type !== 'count' || !flags.includes('count-differs')) continue
    const { binId } = entry.end
    const { opId } = entry.operation
    await insertRecount(tx, { binId, opId, cause: 'count-differs', createdAt: entry.receivedAt })
    const settles = written.slice(i + 1).find((w) => w.entry.end.binId === binId && w.entry.operation.type === 'count')
    if (settles) await closeRecounts(tx, binId, settles.entry.operation.opId, settles.entry.receivedAt)
  }
}

/** Writes devices down with their first and last day. */
export async function seenDevices(
  db: Db,
  devices: readonly { deviceId: string; appVersion: string; first: Date; last: Date }[],
): Promise<void> {
  for (const device of devices) {
    await seenDevice(db, device.deviceId, device.appVersion, device.first)
    await seenDevice(db, device.deviceId, device.appVersion, device.last)
  }
}
