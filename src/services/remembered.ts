import { createStore, del, get, set } from 'idb-keyval'
import { z } from 'zod'
import { User } from '#shared/contracts/people.ts'

/** Hours for which a phone believes who it belongs to after its last contact with the server. */
export const REMEMBER_HOURS = 14

const Remembered = z.object({
  user: User,
  authzVersion: z.number(),
  /** Milliseconds since 1970. */
  validUntil: z.number(),
})
export type Remembered = z.infer<typeof Remembered>

const KEY = 'identity'
const LEFT = 'signed-out'
const store = () => createStore('brimline-identity', 'kept')

/**
 * Who this phone last belonged to; anything unreadable counts as nobody. Past `validUntil` a person may still finish
 * and save counts, so the identity is given out all the same and the caller says that it was not checked.
 */
export async function readRemembered(): Promise<Remembered | null> {
  try {
    const parsed = Remembered.safeParse(await get(KEY, store()))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

export async function writeRemembered(user: User, authzVersion: number, now: number): Promise<void> {
  const kept = Remembered.parse({ user, authzVersion, validUntil: now + REMEMBER_HOURS * 3_600_000 })
  try {
    await set(KEY, kept, store())
  } catch {
    // A phone that cannot keep anything still works with a network; counting warns about it on its own.
  }
}

export async function forgetRemembered(): Promise<void> {
  try {
    await del(KEY, store())
  } catch {
    // Nothing is kept then.
  }
}

/**
 * A sign-out that the server has not heard of: without a network its cookie stays valid, and without this mark the next
 * start would take the old session up again and send in its name.
 */
export async function markSignedOut(isPending: boolean): Promise<void> {
  try {
    if (isPending) await set(LEFT, true, store())
    else await del(LEFT, store())
  } catch {
    // Then only the page that is open knows it.
  }
}

export async function isSignOutPending(): Promise<boolean> {
  try {
    return (await get(LEFT, store())) === true
  } catch {
    return false
  }
}
