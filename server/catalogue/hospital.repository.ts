import { eq } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { hospitals } from './catalogue.tables.ts'

export type HospitalRow = typeof hospitals.$inferSelect

export async function findHospital(db: Reader): Promise<HospitalRow | null> {
  const [row] = await db.select().from(hospitals).where(eq(hospitals.id, 1))
  return row ?? null
}

export async function insertHospital(tx: Tx, row: typeof hospitals.$inferInsert): Promise<void> {
  await tx.insert(hospitals).values(row)
}

export async function updateHospitalRow(tx: Tx, set: Partial<HospitalRow>): Promise<void> {
  if (Object.keys(set).length) await tx.update(hospitals).set(set).where(eq(hospitals.id, 1))
}

/** Lets one transaction at a time decide something about the whole hospital. */
export async function lockHospital(tx: Tx): Promise<void> {
  await tx.select({ id: hospitals.id }).from(hospitals).for('update')
}
