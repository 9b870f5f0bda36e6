import { and, asc, eq, gte, inArray, isNull, lt, lte, or } from 'drizzle-orm'
import type { Db, Reader, Tx } from '../db/client.ts'
import { isDuplicate } from '../db/errors.ts'
import { jobs } from './jobs.tables.ts'

export type JobRow = typeof jobs.$inferSelect

/** A second job under a key that still waits is the same job. */
export async function insertJob(tx: Tx | Db, row: typeof jobs.$inferInsert): Promise<void> {
  try {
    await tx.insert(jobs).values(row)
  } catch (error) {
    if (!isDuplicate(error)) throw error
  }
}

export async function leaseJob(
  db: Db,
  kinds: string[],
  owner: string,
  now: Date,
  leaseMs: number,
): Promise<JobRow | null> {
  const free = or(isNull(jobs.leaseUntil), lt(jobs.leaseUntil, now))
  const [due] = await db
    .select({ id: jobs.id })
    .from(jobs)
    .where(and(inArray(jobs.kind, kinds), lte(jobs.runAt, now), free))
    .orderBy(asc(jobs.runAt), asc(jobs.id))
    .limit(1)
  if (!due) return null
  // The key is freed with the lease: what happens while the job runs asks for a run of its own.
  await db
    .update(jobs)
    .set({ leaseOwner: owner, leaseUntil: new Date(now.getTime() + leaseMs), dedupeKey: null })
    .where(and(eq(jobs.id, due.id), free))
  const [row] = await db
    .select()
    .from(jobs)
    .where(and(eq(jobs.id, due.id), eq(jobs.leaseOwner, owner)))
  return row ?? null
}

export async function renewLease(db: Db, id: number, owner: string, leaseUntil: Date): Promise<void> {
  await db
    .update(jobs)
    .set({ leaseUntil })
    .where(and(eq(jobs.id, id), eq(jobs.leaseOwner, owner)))
}

export async function deleteJob(db: Db, id: number): Promise<void> {
  await db.delete(jobs).where(eq(jobs.id, id))
}

export async function failJob(
  db: Db,
  id: number,
  set: { attempts: number; runAt: Date; lastError: string },
): Promise<void> {
  await db
    .update(jobs)
    .set({ ...set, leaseUntil: null, leaseOwner: null })
    .where(eq(jobs.id, id))
}

export async function listStuck(db: Reader, attempts: number): Promise<JobRow[]> {
  return db.select().from(jobs).where(gte(jobs.attempts, attempts)).limit(100)
}
