/** Small differences between two clocks that nobody needs to hear about. */
const toleranceMs = 5_000
const suspectErrorMs = 120_000
const oldMs = 7 * 86_400_000

/** What a phone says about the time of an entry; epoch ms throughout. */
export interface StatedTime {
  deviceTime: number
  estTime?: number | null
  lastContact?: number | null
  offsetErrMs?: number | null
  /** A time a person states for a sheet typed in later. */
  observedAt?: number | null
}

/**
 * When an entry counts: the phone's estimate, kept between its last contact and the moment we heard of it.
 * Worked out once, at first acceptance, and stored. A wrong clock is flagged, never refused.
 */
export function effectiveTime(stated: StatedTime, receivedAt: number): { effectiveAt: number; suspect: boolean } {
  if (stated.observedAt != null) return { effectiveAt: Math.min(stated.observedAt, receivedAt), suspect: false }
  const estimate = stated.estTime ?? stated.deviceTime
  const floor = stated.lastContact != null ? Math.min(stated.lastContact, receivedAt) : -Infinity
  const effectiveAt = Math.min(Math.max(estimate, floor), receivedAt)
  const suspect =
    Math.abs(effectiveAt - estimate) > toleranceMs ||
    (stated.offsetErrMs ?? 0) > suspectErrorMs ||
    receivedAt - effectiveAt > oldMs
  return { effectiveAt, suspect }
}
