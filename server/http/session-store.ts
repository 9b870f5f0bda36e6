import session, { type SessionData } from 'express-session'
import { eq } from 'drizzle-orm'
import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { sessions } from '../people/people.tables.ts'

/** Longer than a shift. */
export const sessionHours = 14
const touchEveryMs = 60_000

type Done = (error?: unknown) => void

/** Sessions in MariaDB, by the injected clock; any instance serves any session. */
export class DatabaseSessionStore extends session.Store {
  constructor(
    private readonly db: Db,
    private readonly clock: Clock,
  ) {
    super()
  }

  override get(sid: string, done: (error: unknown, data?: SessionData | null) => void): void {
    this.db
      .select()
      .from(sessions)
      .where(eq(sessions.sid, sid))
      .then(([row]) => {
        if (!row || row.expiresAt.getTime() <= this.clock.now().getTime()) return done(null, null)
        done(null, row.data as SessionData)
      })
      .catch((error: unknown) => done(error))
  }

  override set(sid: string, data: SessionData, done?: Done): void {
    const userId = Number((data as { passport?: { user?: number } }).passport?.user ?? 0) || null
    const now = this.clock.now()
    const expiresAt = this.expiry()
    this.db
      .insert(sessions)
      .values({ sid, userId, data, createdAt: now, expiresAt })
      .onDuplicateKeyUpdate({ set: { userId, data, expiresAt } })
      .then(() => done?.())
      .catch((error: unknown) => done?.(error))
  }

  override destroy(sid: string, done?: Done): void {
    this.db
      .delete(sessions)
      .where(eq(sessions.sid, sid))
      .then(() => done?.())
      .catch((error: unknown) => done?.(error))
  }

  override touch(sid: string, data: SessionData, done?: Done): void {
    const now = this.clock.now().getTime()
    const last = data.touchedAt ?? 0
    if (now - last < touchEveryMs && now >= last) return done?.()
    data.touchedAt = now
    this.set(sid, data, done)
  }

  private expiry(): Date {
    return new Date(this.clock.now().getTime() + sessionHours * 3_600_000)
  }
}

declare module 'express-session' {
  interface SessionData {
    /** Epoch ms of the last request that was written down. */
    touchedAt?: number
  }
}
