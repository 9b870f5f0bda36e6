import type { Fitted } from './fitted.ts'
import type { PolicyResult } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

// How much history counts as enough (interface, "sufficient").
const ENOUGH_INTERVALS = 8
const ENOUGH_DAYS = 28

/** The demand part of a result. Parameters given as known need no history and count as sufficient. */
export function demandSummary(
  input: ResolvedInput,
  estimate: Pick<Fitted, 'meanPerDay' | 'variancePerDay' | 'dispersion'>,
): NonNullable<PolicyResult['demand']> {
  const intervals = input.intervals ?? []
  const censored = intervals.filter((interval) => interval.censored).length
  const days = intervals.reduce((sum, interval) => sum + interval.days, 0)
  return {
    meanPerDay: estimate.meanPerDay,
    variancePerDay: estimate.variancePerDay,
    dispersion: estimate.dispersion,
    intervals: intervals.length,
    days,
    censoredIntervals: censored,
    excludedIntervals: input.excludedIntervals,
    sufficient:
      input.demand !== null ||
      (intervals.length >= ENOUGH_INTERVALS && days >= ENOUGH_DAYS && censored < intervals.length),
  }
}
