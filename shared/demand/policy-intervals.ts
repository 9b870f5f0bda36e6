import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { DemandInterval } from './demand-events.ts'

type PolicyInterval = NonNullable<PolicyInput['intervals']>[number]

/** Wastage above this share of use is provided for. */
const worthCounting = 0.02

/**
 * The intervals a policy learns from, oldest first: the used ones, negative ones merged with the neighbour of opposite
 * residual (statistics 4.10), never clipped at 0, since clipping would raise the estimate of use. Only intervals that
 * share a count are merged: it is the miscount between them that cancels.
 *
 * Intervals left out for what they are go along with weight 0, so that the result can say how many there were; those
 * that are merely too old do not.
 *
 * @returns empty when no interval may be used
 */
export function policyIntervals(intervals: readonly DemandInterval[]): PolicyInterval[] {
  if (!intervals.some((i) => i.used)) return []
  const merged = intervals.filter((i) => i.why !== 'too-old').map((i) => ({ ...i, weight: i.used ? i.weight : 0 }))
  const settled = new Set<string>()
  for (;;) {
    const at = merged.findIndex((i) => i.used && i.quantity < 0 && !settled.has(i.closingOpId))
    if (at < 0) break
    const other = neighbourOf(merged, at)
    if (other === null) {
      settled.add(merged[at]!.closingOpId)
      continue
    }
    const first = Math.min(at, other)
    merged.splice(first, 2, join(merged[first]!, merged[first + 1]!))
  }
  return merged.map((i) => ({
    days: i.days,
    exposureDays: i.exposureDays,
    quantity: i.quantity,
    censored: i.censored,
    weight: i.weight,
  }))
}

/** The used neighbour across a shared count that lies furthest above the mean: the likeliest other half of a miscount. */
function neighbourOf(intervals: DemandInterval[], at: number): number | null {
  const used = intervals.filter((i) => i.used)
  const mean = used.reduce((s, i) => s + i.quantity, 0) / used.reduce((s, i) => s + i.exposureDays, 0)
  const here = intervals[at]!
  const candidates = [at - 1, at + 1].filter((i) => {
    const there = intervals[i]
    return there?.used && (i < at ? there.closingOpId === here.openingOpId : here.closingOpId === there.openingOpId)
  })
  const residual = (i: number): number => intervals[i]!.quantity - mean * intervals[i]!.exposureDays
  return candidates.reduce<number | null>((best, i) => (best === null || residual(i) > residual(best) ? i : best), null)
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
