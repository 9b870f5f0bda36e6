import { and, asc, eq, gte, inArray, isNull, lt, lte, or } from 'drizzle-orm'
import type { Db, Reader, Tx } from '../db/client.ts'
import { isDuplicate } from '../db/errors.ts'
import { mailOutbox } from './mail.tables.ts'

export type MailRow = typeof mailOutbox.$inferSelect

/** A second message under one key is the same message: it is left out silently. */
export async function insertMail(tx: Tx, row: typeof mailOutbox.$inferInsert): Promise<void> {
  try {
    await tx.insert(mailOutbox).values(row)
  } catch (error) {
    if (!isDuplicate(error)) throw error
  }
}

/** Leases what is due for one sender; works without SKIP LOCKED and with any number of senders. */
export async function leaseDue(db: Db, owner: string, now: Date, leaseMs: number, limit: number): Promise<MailRow[]> {
  const due = await db
    .select({ id: mailOutbox.id })
    .from(mailOutbox)
    .where(
      and(
        eq(mailOutbox.state, 'due'),
        lte(mailOutbox.nextAt, now),
        or(isNull(mailOutbox.leaseUntil), lt(mailOutbox.leaseUntil, now)),
      ),
    )
    .orderBy(asc(mailOutbox.id))
    .limit(limit)
  if (due.length === 0) return []
  const ids = due.map((d) => d.id)
  await db
    .update(mailOutbox)
    .set({ leaseOwner: owner, leaseUntil: new Date(now.getTime() + leaseMs) })
    .where(
      and(
        inArray(mailOutbox.id, ids),
        eq(mailOutbox.state, 'due'),
        or(isNull(mailOutbox.leaseUntil), lt(mailOutbox.leaseUntil, now)),
      ),
    )
  return db
    .select()
    .from(mailOutbox)
    .where(and(inArray(mailOutbox.id, ids), eq(mailOutbox.leaseOwner, owner), eq(mailOutbox.state, 'due')))
    .orderBy(asc(mailOutbox.id))
}

export async function updateMail(db: Db, id: number, set: Partial<MailRow>): Promise<void> {
  await db.update(mailOutbox).set(set).where(eq(mailOutbox.id, id))
}

/** Mail that failed several times and still waits. */
export async function listStuck(db: Reader, attempts: number): Promise<MailRow[]> {
  return db
    .select()
    .from(mailOutbox)
    .where(and(eq(mailOutbox.state, 'due'), gte(mailOutbox.attempts, attempts)))
    .limit(100)
}
