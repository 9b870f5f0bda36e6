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
  const used = intervals.filter((i) => i.used)
  // Merging moves neither sum.
  const perDay = used.reduce((sum, i) => sum + i.quantity, 0) / used.reduce((sum, i) => sum + i.exposureDays, 0)
  for (let at = 0; at < merged.length;) {
    const other = merged[at]!.used && merged[at]!.quantity < 0 ? neighbourOf(merged, at, perDay) : null
    if (other === null) {
      at += 1
      continue
    }
    at = Math.min(at, other)
    const [left, right] = [merged[at]!, merged[at + 1]!]
    mergedIds.add(left.closingOpId).add(right.closingOpId)
    merged.splice(at, 2, join(left, right))
  }
  return { intervals: merged, mergedIds }
}

/** The used neighbour across a shared count that lies furthest above the mean: the likeliest other half of a miscount. */
function neighbourOf(intervals: readonly DemandInterval[], at: number, perDay: number): number | null {
  const here = intervals[at]!
  const candidates = [at - 1, at + 1].filter((i) => {
    const there = intervals[i]
    return there?.used && (i < at ? there.closingOpId === here.openingOpId : here.closingOpId === there.openingOpId)
  })
  const residual = (i: number): number => intervals[i]!.quantity - perDay * intervals[i]!.exposureDays
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
