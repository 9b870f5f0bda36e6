import type { Ved } from '#shared/contracts/catalogue.ts'
import type { Reader, Tx } from '../db/client.ts'
import { serviceLevelClasses } from './review.tables.ts'

export async function listClassLevels(db: Reader): Promise<{ ved: Ved; level: number }[]> {
  return db.select().from(serviceLevelClasses)
}

export async function upsertClassLevel(tx: Tx, ved: Ved, level: number): Promise<void> {
  await tx.insert(serviceLevelClasses).values({ ved, level }).onDuplicateKeyUpdate({ set: { level } })
}
