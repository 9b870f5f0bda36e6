import { index, int, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, jsonOf } from '../db/columns.ts'

/** Work that runs behind the answer. Written in the transaction that causes it; leased, so any instance may run it. */
export const jobs = mysqlTable(
  'jobs',
  {
    id: id(),
    kind: varchar({ length: 30 }).notNull(),
    /** One waiting job per key: a second cause while it waits changes nothing. */
    dedupeKey: varchar({ length: 80 }),
    payload: jsonOf<unknown>().notNull(),
    runAt: instant().notNull(),
    attempts: int().notNull(),
    leaseOwner: varchar({ length: 64 }),
    leaseUntil: instant(),
    lastError: varchar({ length: 300 }),
    createdAt: instant().notNull(),
  },
  (t) => [unique('jobs_dedupe').on(t.dedupeKey), index('jobs_due').on(t.runAt)],
)
