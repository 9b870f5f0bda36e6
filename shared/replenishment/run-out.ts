import { negativeBinomialUpperTail } from '#shared/stats/negative-binomial-upper-tail.ts'

const dayMs = 86_400_000
/** Further ahead than this an estimate from counts says nothing. */
export const horizonDays = 45
const early = 0.1
const late = 0.9
const nearlyPoisson = 1.0001

/** What a bin's stock has to last against. Units of use; epoch ms. */
export interface RunOutInput {
  /** Usable units by the ledger, true at `since`. */
  onHand: number
  /** Moment of the last count. */
  since: number
  meanPerDay: number
  /** Variance-to-mean ratio of demand. */
  dispersion: number
}

/** Probability that demand from `since` to `at` is more than what is on hand. An estimate. */
export function runOutProbability(input: RunOutInput, at: number): number {
  const mean = (input.meanPerDay * Math.max(0, at - input.since)) / dayMs
  if (mean <= 0) return 0
  const ratio = Math.max(nearlyPoisson, input.dispersion)
  return negativeBinomialUpperTail(input.onHand, mean / (ratio - 1), 1 / ratio)
}

/**
 * When stock is likely out: a range that holds 8 times in 10 (the 10 % and 90 % points of the time to run out).
 * Demand is NB with constant variance-to-mean ratio (statistics 2.2); null is "not within the horizon".
 */
export function runOutRange(input: RunOutInput, now: number): { early: number | null; late: number | null } {
  return { early: timeOf(input, early, now), late: timeOf(input, late, now) }
}

function timeOf(input: RunOutInput, probability: number, now: number): number | null {
  const end = now + horizonDays * dayMs
  if (runOutProbability(input, end) < probability) return null
  let low = input.since
  let high = end
  while (high - low > 60_000) {
    const middle = (low + high) / 2
    if (runOutProbability(input, middle) >= probability) high = middle
    else low = middle
  }
  return Math.max(high, now)
}
