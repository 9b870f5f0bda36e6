/**
 * What a device knows of the true time. Every reply carries the server's time; the offset is good to half the round
 * trip. Everything in milliseconds since 1970 or milliseconds.
 */
export interface Clock {
  /** Server time minus device time; null when never learnt, or the device's clock was set back since. */
  offsetMs: number | null
  errMs: number | null
  /** Device time at which it was learnt. */
  learntAt: number | null
  /** Server time of the last contact. */
  lastContact: number | null
  /** The last time given to an entry since the last contact: later entries are never earlier. */
  floor: number | null
}

export const unknownClock: Clock = { offsetMs: null, errMs: null, learntAt: null, lastContact: null, floor: null }

/** After a reply: `sentAt` and `receivedAt` are device times around it. The floor starts anew. */
export function learn(serverTime: number, sentAt: number, receivedAt: number): Clock {
  return {
    offsetMs: Math.round(serverTime - (sentAt + receivedAt) / 2),
    errMs: Math.ceil(Math.max(0, receivedAt - sentAt) / 2),
    learntAt: receivedAt,
    lastContact: serverTime,
    floor: null,
  }
}

export interface Stamp {
  deviceTime: string
  estTime: string
  lastContact: string | null
  clockOffsetMs: number | null
  offsetErrMs: number | null
}

const iso = (ms: number): string => new Date(ms).toISOString()

/**
 * The time of an entry, fixed when it is saved: device time plus offset, never before an earlier entry since the last
 * contact, never before the last contact. The floor is dropped at each contact, so one wild clock cannot poison later
 * days. A wrong clock is flagged by the server, never refused.
 */
export function stamp(clock: Clock, now: number): { stamp: Stamp; clock: Clock } {
  // A device clock before the moment of the last reply was set back: what was learnt no longer holds.
  const known = clock.offsetMs !== null && clock.learntAt !== null && now >= clock.learntAt
  const offset = known ? (clock.offsetMs ?? 0) : 0
  const est = Math.max(now + offset, clock.floor ?? -Infinity, clock.lastContact ?? -Infinity)
  return {
    stamp: {
      deviceTime: iso(now),
      estTime: iso(est),
      lastContact: clock.lastContact === null ? null : iso(clock.lastContact),
      clockOffsetMs: known ? clock.offsetMs : null,
      offsetErrMs: known ? clock.errMs : null,
    },
    clock: { ...clock, floor: est },
  }
}
