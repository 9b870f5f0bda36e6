import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'

/**
 * The law of demand over a stretch of days: what every method boils down to.
 *
 * Units: units of use. `cdf(r)` = P(D <= r); `loss(r)` = E[(D - r)+], absent where a method has none.
 */
export interface DemandLaw {
  mean: number
  variance: number
  cdf(r: number): number
  loss?: (r: number) => number
  /** Exact quantile of a continuous law, before it is rounded up; whole-number laws have none. */
  exactQuantile?: (p: number) => number
  /** Smallest whole r >= 0 with cdf(r) >= p, where a law finds it faster than by asking `cdf` here and there. */
  level?: (p: number) => number
  /** Rounding to allow for where the distribution function is a long sum; 0 unless given. */
  slack?: number
}

/**
 * Smallest whole number of units r >= 0 with P(D <= r) >= p.
 *
 * Continuous laws: max(0, ceil(r_exact - 1e-9)), never rounded to nearest (statistics, section 2.1).
 *
 * @throws {RangeError} when the level would pass 2^53
 */
export function levelFor(law: DemandLaw, p: number): number {
  if (law.exactQuantile) {
    const level = Math.max(0, Math.ceil(law.exactQuantile(p) - 1e-9))
    if (!(level <= Number.MAX_SAFE_INTEGER)) throw new RangeError('the distribution function does not reach p')
    return level
  }
  if (law.level) return law.level(p)
  return integerQuantile(
    law.cdf,
    p - (law.slack ?? 0),
    law.mean + normalQuantile(p) * Math.sqrt(Math.max(0, law.variance)),
  )
}

/** Demand that is certain: all of it lies at `value`. */
export function pointLaw(value: number): DemandLaw {
  return {
    mean: value,
    variance: 0,
    cdf: (r) => (r >= value - 1e-9 ? 1 : 0),
    loss: (r) => Math.max(0, value - r),
    exactQuantile: () => value,
  }
}

/**
 * The mean of several laws with given weights (adding up to 1): demand over a lead time that varies between
 * deliveries. Source: statistics, section 1.3; variance by the law of total variance.
 */
export function averageLaw(parts: { law: DemandLaw; weight: number }[]): DemandLaw {
  const [only] = parts
  if (only && parts.length === 1) return only.law
  const average = (value: (law: DemandLaw) => number) =>
    parts.reduce((sum, part) => sum + part.weight * value(part.law), 0)
  const mean = average((law) => law.mean)
  const hasLoss = parts.every((part) => part.law.loss)
  return {
    mean,
    variance: average((law) => law.variance + (law.mean - mean) ** 2),
    cdf: (r) => average((law) => law.cdf(r)),
    ...(hasLoss ? { loss: (r: number) => average((law) => law.loss!(r)) } : {}),
  }
}
