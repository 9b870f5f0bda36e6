import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { DemandInterval } from './demand-events.ts'

type PolicyInterval = NonNullable<PolicyInput['intervals']>[number]

/** Wastage above this share of use is provided for. */
const worthCounting = 0.02

/**
 * The intervals a policy learns from, oldest first: the used ones, negative ones merged with the neighbour of opposite
 * residual (statistics 4.10), never clipped at 0, since clipping would raise the estimate of use.
 */
export function policyIntervals(intervals: readonly DemandInterval[]): PolicyInterval[] {
  const merged = intervals.filter((i) => i.used).map((i) => ({ ...i }))
  for (;;) {
    const at = merged.findIndex((i) => i.quantity < 0)
    if (at < 0 || merged.length < 2) break
    const other = neighbourOf(merged, at)
    const [first, second] = [Math.min(at, other), Math.max(at, other)]
    merged.splice(first, 2, join(merged[first]!, merged[second]!))
  }
  return merged.map((i) => ({
    days: i.days,
    exposureDays: i.exposureDays,
    quantity: i.quantity,
    censored: i.censored,
    weight: i.weight,
  }))
}

/** The neighbour that lies furthest above the mean: the likeliest to hold the other half of a miscount. */
function neighbourOf(intervals: DemandInterval[], at: number): number {
  const exposure = intervals.reduce((s, i) => s + i.exposureDays, 0)
  const mean = intervals.reduce((s, i) => s + i.quantity, 0) / exposure
  const residual = (i: number): number => {
    const interval = intervals[i]
    return interval ? interval.quantity - mean * interval.exposureDays : -Infinity
  }
  return residual(at - 1) >= residual(at + 1) ? at - 1 : at + 1
}

function join(first: DemandInterval, second: DemandInterval): DemandInterval {
  const days = first.days + second.days
  return {
    ...first,
    closingOpId: second.closingOpId,
    closedAt: second.closedAt,
    days,
    exposureDays: first.exposureDays + second.exposureDays,
    quantity: first.quantity + second.quantity,
    censored: first.censored || second.censored,
    weight: (first.weight * first.days + second.weight * second.days) / days,
    wastage: first.wastage + second.wastage,
  }
}

/** Units thrown away per day, where that is more than 2 % of use; else 0 (statistics 4.0). */
export function wastageRate(intervals: readonly DemandInterval[]): number {
  const used = intervals.filter((i) => i.used)
  const days = used.reduce((s, i) => s + i.days, 0)
  const wasted = used.reduce((s, i) => s + i.wastage, 0)
  const use = used.reduce((s, i) => s + i.quantity, 0)
  return days > 0 && wasted > worthCounting * Math.max(0, use) ? wasted / days : 0
}
