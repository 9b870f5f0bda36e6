import type { DemandInterval } from './demand-events.ts'

/** Half of an interval's weight is gone after this many days (statistics 4.12: 60 to 120 is a sane range). */
export const halfLifeDays = 120
const fewestEffective = 5
const dayMs = 86_400_000

/**
 * Weighs intervals by age, from the newest one's close: 2^(−age / half-life).
 * Nothing is discounted while that would leave fewer than 5 effective intervals, (Σw)² / Σw².
 */
export function forget(intervals: readonly DemandInterval[]): DemandInterval[] {
  const used = intervals.filter((i) => i.used)
  const newest = used.reduce((at, i) => Math.max(at, i.closedAt), 0)
  const weigh = (i: DemandInterval): number => 2 ** (-(newest - i.closedAt) / dayMs / halfLifeDays)
  const sum = used.reduce((s, i) => s + weigh(i), 0)
  const squares = used.reduce((s, i) => s + weigh(i) ** 2, 0)
  if (squares === 0 || (sum * sum) / squares < fewestEffective) return [...intervals]
  return intervals.map((i) => (i.used ? { ...i, weight: weigh(i) } : i))
}
