import type { Operation } from '#shared/contracts/counts.ts'
import {
  up,
  type OutboxEntry,
  type OutboxLabel,
  type OutboxReply,
  type OutboxState,
} from '#shared/stored/outbox/index.ts'
import { asClock, timeZone } from './device.ts'
import { withDb, type OfflineDb } from './offline-db.ts'
import { stamp } from './time.ts'

/** Largest batch the server takes. */
export const BATCH_ITEMS = 100
const KEEP_RECEIPTS_MS = 30 * 86_400_000

type Stamped = 'localSeq' | 'deviceTime' | 'estTime' | 'tz' | 'lastContact' | 'clockOffsetMs' | 'offsetErrMs' | 'v'
/** An operation without what is stamped on it when it is saved. */
export type NewOperation = Operation extends infer O ? (O extends Operation ? Omit<O, Stamped> : never) : never

export interface NewEntry {
  userId: string
  initials: string
  op: NewOperation
  label: OutboxLabel
}

const channelName = 'brimline-outbox'
const listeners = new Set<() => void>()
let channel: BroadcastChannel | null = null

/** Tells the caller whenever entries may have changed, in this tab or another. Returns the way to stop. */
export function onOutboxChange(listener: () => void): () => void {
  listeners.add(listener)
  return () => listeners.delete(listener)
}

/** Listens to other tabs; let go on `pagehide`, for an open channel keeps a page out of the back-forward cache. */
export function joinOtherTabs(): void {
  if (channel || typeof BroadcastChannel === 'undefined') return
  channel = new BroadcastChannel(channelName)
  channel.onmessage = () => listeners.forEach((listener) => listener())
}

export function leaveOtherTabs(): void {
  channel?.close()
  channel = null
}

function changed(): void {
  listeners.forEach((listener) => listener())
  channel?.postMessage('changed')
}

/** Without proxies and prototypes, as IndexedDB and JSON both keep it. */
const plain = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T

const isEntry = (entry: OutboxEntry | null): entry is OutboxEntry => entry !== null

const writing = (db: OfflineDb) => db.transaction(['outbox', 'meta'], 'readwrite', { durability: 'strict' })
type WriteTx = ReturnType<typeof writing>

/** One strict transaction; it is complete when this resolves, and holds nothing when this throws. */
function inOneWrite<T>(work: (tx: WriteTx) => Promise<T>): Promise<T> {
  return withDb(async (db) => {
    const tx = writing(db)
    // A failure of our own in between would otherwise let the half that was put commit by itself.
    const { done } = tx
    try {
      const result = await work(tx)
      await done
      return result
    } catch (error) {
      done.catch(() => undefined)
      try {
        tx.abort()
      } catch {
        // It has ended already.
      }
      throw error
    }
  })
}

async function nextSeq(tx: WriteTx): Promise<number> {
  const stored = await tx.objectStore('meta').get('localSeq')
  // A lost counter goes on behind the last entry, so order within the device stays one order.
  const last = await tx.objectStore('outbox').index('seq').openKeyCursor(null, 'prev')
  const behind = typeof last?.key === 'number' ? last.key : 0
  return Math.max(typeof stored === 'number' ? stored : 0, behind) + 1
}

async function write(tx: WriteTx, fresh: NewEntry, now: number): Promise<OutboxEntry> {
  const outbox = tx.objectStore('outbox')
  const meta = tx.objectStore('meta')
  // A repeated try finds what the first one wrote: the same id is never saved twice.
  const present = up(await outbox.get(fresh.op.opId))
  if (present) return present
  const localSeq = await nextSeq(tx)
  const timed = stamp(asClock(await meta.get('clock')), now)
  const op = { ...plain(fresh.op), ...timed.stamp, v: 1, localSeq, tz: timeZone() }
  const entry: OutboxEntry = {
    schema: 1,
    opId: fresh.op.opId,
    userId: fresh.userId,
    initials: fresh.initials,
    localSeq,
    state: 'queued',
    op,
    label: plain(fresh.label),
    savedAt: now,
    closedAt: null,
    faults: 0,
    batchLimit: BATCH_ITEMS,
    reply: null,
    replacedBy: null,
    discardReason: null,
  }
  await outbox.add(entry)
  await meta.put(localSeq, 'localSeq')
  await meta.put(timed.clock, 'clock')
  return entry
}

/**
 * Saves entries, all or none. Resolves only when the transaction is complete: then, and only then, may the screen say
 * that they are on this phone.
 */
export async function saveEntries(fresh: NewEntry[], now: number): Promise<OutboxEntry[]> {
  const saved = await inOneWrite(async (tx) => {
    const entries: OutboxEntry[] = []
    for (const one of fresh) entries.push(await write(tx, one, now))
    return entries
  })
  changed()
  return saved
}

async function byState(db: OfflineDb, userId: string, state: OutboxState): Promise<OutboxEntry[]> {
  const rows = await db.getAllFromIndex('outbox', 'owner', IDBKeyRange.only([userId, state]))
  return rows.map(up).filter(isEntry)
}

/** All entries of one person, oldest first. */
export async function entriesOf(userId: string): Promise<OutboxEntry[]> {
  const states: OutboxState[] = ['queued', 'sending', 'attention', 'acked', 'discarded']
  const rows = await withDb(async (db) => (await Promise.all(states.map((state) => byState(db, userId, state)))).flat())
  return rows.sort((a, b) => a.localSeq - b.localSeq)
}

/** What may be sent now for one person, in the order it was made. */
export async function queuedOf(userId: string): Promise<OutboxEntry[]> {
  const rows = await withDb((db) => byState(db, userId, 'queued'))
  return rows.sort((a, b) => a.localSeq - b.localSeq)
}

/** How many entries of other people wait on this phone: initials and number only. */
export async function waitingOfOthers(userId: string | null): Promise<{ initials: string; count: number }[]> {
  const rows = (await withDb((db) => db.getAll('outbox'))).map(up).filter(isEntry)
  const open = rows.filter((row) => row.userId !== userId && ['queued', 'sending', 'attention'].includes(row.state))
  const counts = new Map<string, { initials: string; count: number }>()
  for (const row of open) {
    const seen = counts.get(row.userId) ?? { initials: row.initials, count: 0 }
    counts.set(row.userId, { ...seen, count: seen.count + 1 })
  }
  return [...counts.values()]
}

export type EntryChange = Partial<
  Pick<OutboxEntry, 'state' | 'reply' | 'faults' | 'batchLimit' | 'closedAt' | 'discardReason' | 'replacedBy'>
>

/** Changes the record around entries, never what is sent. Entries that are closed already stay closed. */
export async function changeEntries(changes: ReadonlyMap<string, EntryChange>): Promise<void> {
  if (changes.size === 0) return
  await inOneWrite(async (tx) => {
    for (const [opId, change] of changes) {
      const entry = up(await tx.objectStore('outbox').get(opId))
      if (!entry || entry.state === 'acked' || entry.state === 'discarded') continue
      await tx.objectStore('outbox').put({ ...entry, ...plain(change) })
    }
  })
  changed()
}

/** At start every `sending` row is queued again: the reply may have been lost, and a repeat is harmless. */
export async function requeueSending(): Promise<void> {
  const rows = (await withDb((db) => db.getAll('outbox'))).map(up).filter(isEntry)
  const stale = rows.filter((row) => row.state === 'sending')
  await changeEntries(new Map(stale.map((row) => [row.opId, { state: 'queued' as const }])))
}

/** Closes an entry that needs attention and saves the one that takes its place, in one transaction. */
export async function replaceEntry(opId: string, fresh: NewEntry, now: number): Promise<OutboxEntry> {
  const saved = await inOneWrite(async (tx) => {
    const entry = await write(tx, fresh, now)
    const old = up(await tx.objectStore('outbox').get(opId))
    if (old && old.state === 'attention') {
      await tx
        .objectStore('outbox')
        .put({ ...old, state: 'discarded', closedAt: now, replacedBy: fresh.op.opId } satisfies OutboxEntry)
    }
    return entry
  })
  changed()
  return saved
}

/** Back to the queue, unchanged, because a person asked for it. */
export const resendEntry = (opId: string): Promise<void> =>
  changeEntries(new Map([[opId, { state: 'queued', faults: 0, batchLimit: 1 }]]))

/** Dropped by a person, with the reason; the row stays for 30 days. */
export const discardEntry = (opId: string, reason: string, now: number): Promise<void> =>
  changeEntries(new Map([[opId, { state: 'discarded', closedAt: now, discardReason: reason }]]))

/** Receipts of acknowledged and dropped entries go after 30 days; nothing else is ever deleted. */
export async function pruneReceipts(now: number): Promise<number> {
  return inOneWrite(async (tx) => {
    let gone = 0
    for (const row of (await tx.objectStore('outbox').getAll()).map(up)) {
      if (!row || (row.state !== 'acked' && row.state !== 'discarded')) continue
      if (row.closedAt === null || now - row.closedAt < KEEP_RECEIPTS_MS) continue
      await tx.objectStore('outbox').delete(row.opId)
      gone += 1
    }
    return gone
  })
}

export const replyOf = (status: string, at: number, more: Partial<OutboxReply> = {}): OutboxReply => ({
  status,
  code: null,
  message: null,
  fixable: false,
  flags: [],
  at,
  ...more,
})
