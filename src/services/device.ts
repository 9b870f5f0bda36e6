import { uuidv7 } from 'uuidv7'
import { withDb } from './offline-db.ts'
import { unknownClock, type Clock } from './time.ts'

let known: string | null = null

/** The id of this device: made once, kept beside the outbox, no secret. */
export async function deviceId(): Promise<string> {
  known ??= await withDb(async (db) => {
    const tx = db.transaction('meta', 'readwrite', { durability: 'strict' })
    const stored = await tx.store.get('device')
    const id = typeof stored === 'string' ? stored : uuidv7()
    if (id !== stored) await tx.store.put(id, 'device')
    await tx.done
    return id
  })
  return known
}

/** The time zone this device shows, for the ledger's reader. */
export const timeZone = (): string => Intl.DateTimeFormat().resolvedOptions().timeZone

/** A stored clock as one; anything unreadable counts as never learnt. */
export function asClock(stored: unknown): Clock {
  if (typeof stored !== 'object' || stored === null) return unknownClock
  const from = stored as Record<string, unknown>
  const number = (name: string): number | null => (typeof from[name] === 'number' ? from[name] : null)
  return {
    offsetMs: number('offsetMs'),
    errMs: number('errMs'),
    learntAt: number('learntAt'),
    lastContact: number('lastContact'),
    floor: number('floor'),
  }
}

/** Keeps what a reply taught about the time. */
export async function rememberClock(clock: Clock): Promise<void> {
  await withDb((db) => db.put('meta', clock, 'clock'))
}

/** Forgets the device in this page, for tests. */
export function forgetDevice(): void {
  known = null
}
