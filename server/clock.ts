/** The one source of time. Everything in the domain asks it; nothing asks the system or the database. */
export interface Clock {
  now(): Date
}

/**
 * The system's clock, or one that starts at `startAt` and ticks on from there.
 * @param startAt set by CLOCK_NOW, never in production
 */
export function systemClock(startAt: Date | null = null): Clock {
  if (!startAt) return { now: () => new Date() }
  const offset = startAt.getTime() - Date.now()
  return { now: () => new Date(Date.now() + offset) }
}

/** A clock that stands still until it is moved; for tests and for the demo hospital's history. */
export function movableClock(start: Date): Clock & { set(at: Date): void } {
  let at = start
  return {
    now: () => new Date(at),
    set: (next) => {
      at = next
    },
  }
}
