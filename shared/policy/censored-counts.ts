import { negativeBinomialUpperTail } from '#shared/stats/negative-binomial-upper-tail.ts'
import { demandMoments } from './demand-moments.ts'
import type { DemandMoments, ExpectedUse } from './demand-moments.ts'
import type { ResolvedInterval } from './resolve-input.ts'

const MOST_ROUNDS = 5000
/**
 * The filled-in squares feed the dispersion that fills them in; with many empty endings and little else that can grow
 * without end. The dispersion used for filling in stays below this many times the largest one in sight.
 */
const DISPERSION_BOUND = 10
/** After so many rounds the dispersion stands still: from hopeless data it may swing for ever, the rate alone settles. */
const SWINGING_ROUNDS = 1000

/** Moments of over-dispersed counts with empty endings filled in by expectation. */
export interface CensoredCounts {
  moments: DemandMoments
  /** Degrees of freedom of the dispersion: whole intervals less one, at least 0 */
  freedom: number
}

/** How the rate follows from the filled-in moments; by default total over exposure. */
type RateRule = (moments: DemandMoments, dispersion: number) => number

/**
 * Rate and dispersion of over-dispersed counts when some intervals ended empty.
 *
 * Repeats: w = max(1.0001, (nu0 w0 + d w^)/(nu0 + d)), d = max(0, u - 1) for u whole intervals; the quantity and the
 * squared quantity of an empty one are replaced by E[D | D >= x] and E[D^2 | D >= x] under the negative binomial with
 * mean mu t and that w; until the rate moves by less than 1e-10. `nu0` 0 means the data alone.
 * Source: statistics, 4.0 "Mixture with censored intervals".
 */
export function censoredCounts(
  intervals: readonly ResolvedInterval[],
  prior: { nu0: number; w0: number },
  rateRule: RateRule = (moments) => moments.meanPerDay,
  plain: DemandMoments = demandMoments(intervals),
): CensoredCounts {
  let moments = plain
  if (!intervals.some((interval) => interval.censored)) return { moments, freedom: Math.max(0, moments.intervals - 1) }
  const whole = intervals.filter((interval) => !interval.censored)
  const freedom = whole.length > 0 ? Math.max(0, demandMoments(whole).intervals - 1) : 0
  const bound = DISPERSION_BOUND * Math.max(1, prior.nu0 > 0 ? prior.w0 : 1, moments.dispersion ?? 1)
  let dispersion = 1.0001
  let rate = moments.meanPerDay > 0 ? moments.meanPerDay : 0.5 / moments.exposureDays
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const seen = moments.dispersion ?? 1
    const known = prior.nu0 + freedom
    const mixed = known > 0 ? (prior.nu0 * prior.w0 + freedom * seen) / known : 1
    if (round < SWINGING_ROUNDS) dispersion = Math.min(bound, Math.max(1.0001, mixed))
    moments = demandMoments(intervals, expectedUse(intervals, rate, dispersion))
    const next = Math.max(0, rateRule(moments, dispersion))
    const change = Math.abs(next - rate)
    rate = next
    if (change < 1e-10 || rate === 0) break
  }
  return { moments, freedom }
}

function expectedUse(intervals: readonly ResolvedInterval[], rate: number, dispersion: number): ExpectedUse[] {
  return intervals.map(({ censored, quantity, exposureDays }) =>
    censored
      ? expectedAtLeast(rate * exposureDays, dispersion, Math.ceil(quantity))
      : { quantity, square: quantity * quantity },
  )
}

/**
 * E[D | D >= c] and E[D^2 | D >= c] for the negative binomial with size k, mean m and w = 1 + beta, from
 * E[D; D >= c] = m P_{k+1}(D >= c - 1) and E[D (D-1); D >= c] = k (k+1) beta^2 P_{k+2}(D >= c - 2).
 */
function expectedAtLeast(mean: number, dispersion: number, bound: number): ExpectedUse {
  const beta = dispersion - 1
  const size = mean / beta
  const reached = bound <= 0 ? 1 : negativeBinomialUpperTail(bound - 1, size, 1 / dispersion)
  // So far out that the tail underflows, demand given that it reached the bound is the bound itself.
  if (!(reached > 1e-280)) return { quantity: bound, square: bound * bound }
  const first = (mean * negativeBinomialUpperTail(bound - 2, size + 1, 1 / dispersion)) / reached
  const factorial = size * (size + 1) * beta * beta * negativeBinomialUpperTail(bound - 3, size + 2, 1 / dispersion)
  return { quantity: first, square: factorial / reached + first }
}
