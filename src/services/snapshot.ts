import { createStore, delMany, get, keys, set, type UseStore } from 'idb-keyval'
import { z } from 'zod'
import { Room, listRooms } from '#shared/contracts/catalogue.ts'
import { readSnapshot, Snapshot } from '#shared/contracts/counts.ts'
import { call } from './api.ts'

/**
 * What this phone keeps of the record, so that counting needs no network. Owner and scope are part of every key; it is
 * only a copy, so it may be lost, and it is dropped at sign-out and when rights change. The outbox lives elsewhere.
 */
export const KeptRoom = Snapshot.omit({ reset: true, tombstones: true }).extend({
  schema: z.literal(1),
  /** Milliseconds since 1970, phone time at which the last answer was asked for. */
  fetchedAt: z.number(),
})
export type KeptRoom = z.infer<typeof KeptRoom>
const KeptRooms = z.object({ schema: z.literal(1), rooms: z.array(Room), fetchedAt: z.number() })
export type KeptRooms = z.infer<typeof KeptRooms>

let store: UseStore | null = null
const reads = (): UseStore => (store ??= createStore('brimline-reads', 'kept'))

/** A cache that cannot be read is an empty one; a dead connection is not used twice. */
async function safely<T>(work: (from: UseStore) => Promise<T>, otherwise: T): Promise<T> {
  try {
    return await work(reads())
  } catch {
    store = null
    return otherwise
  }
}

const roomKey = (userId: string, roomId: string): string => `${userId}/room/${roomId}`
const roomsKey = (userId: string): string => `${userId}/rooms`

export async function keptRoom(userId: string, roomId: string): Promise<KeptRoom | null> {
  const parsed = KeptRoom.safeParse(await safely<unknown>((from) => get(roomKey(userId, roomId), from), null))
  return parsed.success ? parsed.data : null
}

export async function keptRooms(userId: string): Promise<KeptRooms | null> {
  const parsed = KeptRooms.safeParse(await safely<unknown>((from) => get(roomsKey(userId), from), null))
  return parsed.success ? parsed.data : null
}

const byKey = <T>(list: readonly T[], key: (one: T) => string): Map<string, T> =>
  new Map(list.map((one) => [key(one), one]))

/** The old list with every row of the touched owners replaced by the new ones. */
const replaced = <T>(
  old: readonly T[],
  fresh: readonly T[],
  touched: ReadonlySet<string>,
  owner: (one: T) => string,
) => [...old.filter((one) => !touched.has(owner(one))), ...fresh]

/**
 * Brings a kept room up to date by what changed since its version. What belongs to a bin or an item that came is
 * replaced as a whole; tombstones take bins away. The result equals a fresh copy.
 */
export function mergeSnapshot(kept: KeptRoom | null, fresh: Snapshot, now: number): KeptRoom {
  const { reset, tombstones, ...body } = fresh
  const next: KeptRoom = { ...body, schema: 1, fetchedAt: now }
  if (reset || !kept || kept.authzVersion !== fresh.authzVersion) return next
  const touched = new Set([...fresh.bins.map((bin) => bin.id), ...tombstones])
  const bins = byKey(kept.bins, (bin) => bin.id)
  for (const id of tombstones) bins.delete(id)
  for (const bin of fresh.bins) bins.set(bin.id, bin)
  const items = byKey(kept.items, (item) => item.id)
  for (const item of fresh.items) items.set(item.id, item)
  const freshItems = new Set(fresh.items.map((item) => item.id))
  const used = new Set([...bins.values()].map((bin) => bin.itemId))
  return {
    ...next,
    bins: [...bins.values()],
    items: [...items.values()].filter((item) => used.has(item.id)),
    barcodes: replaced(kept.barcodes, fresh.barcodes, freshItems, (row) => row.itemId).filter((row) =>
      used.has(row.itemId),
    ),
    // Cautions without an item speak for the hospital and come whole each time.
    cautions: replaced(kept.cautions, fresh.cautions, new Set([...freshItems, '']), (row) => row.itemId ?? '').filter(
      (row) => row.itemId === null || used.has(row.itemId),
    ),
    holds: replaced(kept.holds, fresh.holds, touched, (row) => row.binId),
    policies: replaced(kept.policies, fresh.policies, touched, (row) => row.binId),
    openLines: replaced(kept.openLines, fresh.openLines, touched, (row) => row.binId),
  }
}

/**
 * Fetches what changed in a room and keeps the result.
 * @throws {Problem} when the server refused, {@link Offline} when it cannot be reached
 */
export async function refreshRoom(userId: string, roomId: string, now: () => number): Promise<KeptRoom> {
  const kept = await keptRoom(userId, roomId)
  // The moment before asking: whatever is acknowledged later is surely not part of the answer.
  const askedAt = now()
  const fresh = await call(readSnapshot, { query: { roomId, since: kept?.version } })
  // Rights changed in between: what was kept may hold what this person must not see any more, so start anew.
  const whole =
    kept && kept.authzVersion !== fresh.authzVersion && !fresh.reset
      ? await call(readSnapshot, { query: { roomId } })
      : fresh
  const next = mergeSnapshot(kept, whole, askedAt)
  await safely((to) => set(roomKey(userId, roomId), next, to), undefined)
  return next
}

/** Fetches the list of rooms in scope and keeps it. */
export async function refreshRooms(userId: string, now: () => number): Promise<KeptRooms> {
  const askedAt = now()
  const answer = await call(listRooms, { query: { pageSize: 500 } })
  const next: KeptRooms = { schema: 1, rooms: answer.items, fetchedAt: askedAt }
  await safely((to) => set(roomsKey(userId), next, to), undefined)
  return next
}

/** Drops every copy, of everyone: at sign-out and when rights change. */
export async function dropReads(): Promise<void> {
  await safely(async (from) => delMany(await keys(from), from), undefined)
}
