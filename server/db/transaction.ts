import type { Db, Tx } from './client.ts'
import { isRetryable } from './errors.ts'

const tries = 5
const baseMs = 50

/**
 * Runs `work` in one transaction and again from the start when the database asks for it.
 * `work` therefore has no effect outside its `tx`.
 */
export async function inTransaction<T>(db: Db, work: (tx: Tx) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await db.transaction(work)
    } catch (error) {
      if (attempt >= tries || !isRetryable(error)) throw error
      await new Promise((resolve) => setTimeout(resolve, Math.random() * baseMs * 2 ** attempt))
    }
  }
}
