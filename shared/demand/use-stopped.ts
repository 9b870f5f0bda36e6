import type { DemandInterval } from './demand-events.ts'

const fewestDays = 90
const gapTimes = 3
const dayMs = 86_400_000

/**
 * Whether use of an item stopped here: none for 90 days or three times the longest past gap between two uses, whichever
 * is longer (statistics 6.1). Only days count on which counts saw something lying there and nothing taken: an empty
 * shelf, a closed ward or a stretch nobody counted proves nothing, and a rise nobody explained may hide a use.
 *
 * @param intervals oldest first, used or not
 * @returns `since`: epoch ms of the count that saw the last use, or of the first count of all; null: not stopped
 */
export function useStopped(intervals: readonly DemandInterval[]): { since: number } | null {
  const first = intervals[0]
  if (!first) return null
  let since = first.openedAt
  let longestGap = 0
  let idle = 0
  let usedBefore = false
  for (const interval of intervals) {
    if (mayHoldUse(interval)) {
      if (usedBefore) longestGap = Math.max(longestGap, (interval.closedAt - since) / dayMs)
      usedBefore = true
      since = interval.closedAt
      idle = 0
    } else if (interval.used) idle += interval.exposureDays
  }
  return idle > Math.max(fewestDays, gapTimes * longestGap) ? { since } : null
}

const mayHoldUse = (interval: DemandInterval): boolean => interval.quantity > 0 || interval.why === 'rise-unexplained'
