import { createHash } from 'node:crypto'
import { problem } from '#shared/contracts/problems.ts'
import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { clearFailures, countFailures, deleteFailure, insertFailure } from './people.repository.ts'

const windowMs = 15 * 60_000
const slowFrom = 5
const accountLimit = 10
const addressLimit = 200
const firstWaitMs = 250

const key = (text: string): string => createHash('sha256').update(text.trim().toLowerCase()).digest('hex')

/** Who is being tried and from where; hashed, so the table of failures names nobody. */
export const attemptKeys = (account: string, address: string) => ({
  accountKey: key(account),
  addressKey: key(address),
})
export type AttemptKeys = ReturnType<typeof attemptKeys>

/**
 * Slows guessing down without ever locking an account for good, so that a stranger cannot lock a ward out.
 * The try is written down before the password is looked at, so that many at once count as many; a success takes it
 * back. From the sixth failure in 15 minutes the answer waits, twice as long each time; the eleventh try is 429 and
 * does not count.
 * @returns milliseconds to wait before the password is looked at
 * @throws {Problem} too-many-attempts
 */
export async function countAttempt(db: Db, clock: Clock, keys: AttemptKeys): Promise<number> {
  const now = clock.now()
  const since = new Date(now.getTime() - windowMs)
  const id = await insertFailure(db, { ...keys, failedAt: now })
  const account = await countFailures(db, { accountKey: keys.accountKey }, since)
  const address = await countFailures(db, { addressKey: keys.addressKey }, since)
  const over = account.n > accountLimit ? account : address.n > addressLimit ? address : null
  if (over) {
    await deleteFailure(db, id)
    const retryAfter = Math.max(
      1,
      Math.ceil(((over.oldest?.getTime() ?? now.getTime()) + windowMs - now.getTime()) / 1000),
    )
    const minutes = Math.ceil(retryAfter / 60)
    throw problem('too-many-attempts', `Too many tries. Wait ${minutes} minutes, or ask for a new password.`, {
      retryAfter,
    })
  }
  return account.n > slowFrom ? firstWaitMs * 2 ** (account.n - slowFrom - 1) : 0
}

export const forgetFailures = (db: Db, keys: AttemptKeys): Promise<void> => clearFailures(db, keys.accountKey)
