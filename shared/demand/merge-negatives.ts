import type { DemandInterval } from './demand-events.ts'

/** Intervals after merging, oldest first, and the closing counts of those that went into a sum. */
export interface Merged {
  intervals: DemandInterval[]
  mergedIds: ReadonlySet<string>
}

/**
 * Merges negative use with the neighbour of opposite residual (statistics 4.10), never clipped at 0, since clipping
 * would raise the estimate of use. Only used intervals that share a count are merged: it is the miscount between them
 * that cancels.
 */
export function mergeNegatives(intervals: readonly DemandInterval[]): Merged {
  const merged = [...intervals]
  const mergedIds = new Set<string>()
  const settled = new Set<string>()
  for (;;) {
    const at = merged.findIndex((i) => i.used && i.quantity < 0 && !settled.has(i.closingOpId))
    if (at < 0) return { intervals: merged, mergedIds }
    const other = neighbourOf(merged, at)
    if (other === null) {
      settled.add(merged[at]!.closingOpId)
      continue
    }
    const first = Math.min(at, other)
    const [left, right] = [merged[first]!, merged[first + 1]!]
    mergedIds.add(left.closingOpId).add(right.closingOpId)
    merged.splice(first, 2, join(left, right))
  }
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
    extraUnits: first.extraUnits + second.extraUnits,
    censored: first.censored || second.censored,
    weight: (first.weight * first.days + second.weight * second.days) / days,
    wastage: first.wastage + second.wastage,
  }
}
