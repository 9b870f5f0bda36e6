import { sql } from 'drizzle-orm'
import { problem } from '#shared/contracts/problems.ts'
import type { Db } from '../db/client.ts'

/** The database answers and is migrated. @throws {Problem} not-ready */
export async function isReady(db: Db): Promise<void> {
  await db.execute(sql`SELECT 1 FROM hospitals LIMIT 1`).catch((cause: unknown) => {
    throw problem('not-ready', undefined, { cause })
  })
}
