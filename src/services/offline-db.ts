import { openDB, type DBSchema, type IDBPDatabase } from 'idb'

/**
 * The one database that must never be lost: entries made on this device, rounds in progress, the device's own numbers.
 * Rows are read as unknown and pass through `shared/stored`, for a phone may hold what an older version wrote.
 */
export interface OfflineSchema extends DBSchema {
  outbox: { key: string; value: unknown; indexes: { owner: [string, string]; seq: number } }
  drafts: { key: string; value: unknown }
  meta: { key: string; value: unknown }
}
export type OfflineDb = IDBPDatabase<OfflineSchema>

const NAME = 'brimline-outbox'
const VERSION = 1
/** Tries of one piece of work before the person is told. */
const BUDGET = 3

let opening: Promise<OfflineDb> | null = null

function drop(): void {
  opening = null
}

function open(): Promise<OfflineDb> {
  const started = openDB<OfflineSchema>(NAME, VERSION, {
    upgrade(db) {
      // Upgrades only ever add stores and indexes; no version may delete or rewrite the outbox.
      if (!db.objectStoreNames.contains('outbox')) {
        const outbox = db.createObjectStore('outbox', { keyPath: 'opId' })
        outbox.createIndex('owner', ['userId', 'state'])
        outbox.createIndex('seq', 'localSeq')
      }
      if (!db.objectStoreNames.contains('drafts')) db.createObjectStore('drafts')
      if (!db.objectStoreNames.contains('meta')) db.createObjectStore('meta')
    },
    blocking(_current, _blocked, event) {
      // Another tab upgrades: let go at once, the next use opens again.
      ;(event.target as IDBDatabase).close()
      drop()
    },
    terminated: drop,
  })
  started.catch(drop)
  return started
}

/** Failures that a fresh connection cures: the browser closed the old one under us. */
function isStale(error: unknown): boolean {
  if (!(error instanceof DOMException) && !(error instanceof Error)) return false
  if (['InvalidStateError', 'UnknownError', 'TransactionInactiveError'].includes(error.name)) return true
  if (error.name === 'AbortError') return true
  return /clos(ed|ing)|connection|in-progress transaction|backing store/i.test(error.message)
}

/**
 * Runs a piece of work on the database. A connection that died is dropped and opened again, up to three times; a cached
 * promise that failed is never used twice. The work must be safe to repeat.
 */
export async function withDb<T>(work: (db: OfflineDb) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      opening ??= open()
      return await work(await opening)
    } catch (error) {
      if (!isStale(error) || attempt >= BUDGET) throw error
      const dead = opening
      drop()
      void dead?.then((db) => db.close()).catch(() => undefined)
    }
  }
}

/** Opens again after the phone was put away: a dead connection is found now instead of at the next count. */
export function watchConnection(): void {
  document.addEventListener('visibilitychange', () => {
    if (document.visibilityState === 'visible') void withDb((db) => db.count('meta')).catch(() => undefined)
  })
}

/** Closes the connection, for tests and before the page is thrown away. */
export async function closeDb(): Promise<void> {
  const dead = opening
  drop()
  await dead?.then((db) => db.close()).catch(() => undefined)
}
