import type { DemandInterval } from './demand-events.ts'

/**
 * Half a unit is added to the use of all intervals together, as the estimate of a Poisson mean with its least prior
 * knowledge does (statistics 4.4): the rate is above 0 even where nothing was used yet.
 */
const halfUnit = 0.5

/**
 * Turns the units a planned change announced into days of usual use: exposure + extra units ÷ base rate.
 *
 * base rate = (max(0, all use − all extra units) + ½) ÷ all exposure, over the used intervals. The extra units are known
 * beforehand and are not for the counts to estimate; as days at the base rate they leave the mean per usual day what it
 * would have been without them, and extra units ahead are turned into days of the protection interval the same way.
 *
 * @param intervals with exposure in usual days, extra units apart, as `cutIntervals` gives them
 * @returns `basePerDay`: units a usual day; null when no interval is used
 */
export function withExtraUnits(intervals: readonly DemandInterval[]): {
  intervals: DemandInterval[]
  basePerDay: number | null
} {
  const used = intervals.filter((i) => i.used)
  if (used.length === 0) return { intervals: [...intervals], basePerDay: null }
  const sum = (of: (i: DemandInterval) => number): number => used.reduce((total, i) => total + of(i), 0)
  const base = Math.max(0, sum((i) => i.quantity) - sum((i) => i.extraUnits)) + halfUnit
  const basePerDay = base / sum((i) => i.exposureDays)
  return {
    intervals: intervals.map((i) =>
      i.extraUnits === 0 ? i : { ...i, exposureDays: i.exposureDays + i.extraUnits / basePerDay },
    ),
    basePerDay,
  }
}
