import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { DemandInterval } from './demand-events.ts'

type PolicyInterval = NonNullable<PolicyInput['intervals']>[number]

/** Wastage above this share of use is provided for. */
const worthCounting = 0.02

/**
 * The intervals a policy learns from, oldest first, of intervals whose negatives are merged (`mergeNegatives`).
 *
 * Intervals left out for what they are go along with weight 0, so that the result can say how many there were; those
 * that are merely too old, or from before the history start, do not.
 *
 * @returns empty when no interval may be used
 */
export function asPolicyIntervals(merged: readonly DemandInterval[]): PolicyInterval[] {
  if (!merged.some((i) => i.used)) return []
  return merged
    .filter((i) => i.why !== 'too-old' && i.why !== 'before-start')
    .map((i) => ({
      days: i.days,
      exposureDays: i.exposureDays,
      quantity: i.quantity,
      censored: i.censored,
      weight: i.used ? i.weight : 0,
    }))
}

/** Units thrown away per day, where that is more than 2 % of use; else 0 (statistics 4.0). */
export function wastageRate(intervals: readonly DemandInterval[]): number {
  const used = intervals.filter((i) => i.used)
  const days = used.reduce((s, i) => s + i.days, 0)
  const wasted = used.reduce((s, i) => s + i.wastage, 0)
  const use = used.reduce((s, i) => s + i.quantity, 0)
  return days > 0 && wasted > worthCounting * Math.max(0, use) ? wasted / days : 0
}
