import type { DemandInterval } from './demand-events.ts'

/** An interval to ask about: typing error, one-off event, or real? Nothing is left out because of it. */
export interface Outlier {
  closingOpId: string
  quantity: number
  /** Units the other intervals would have led one to expect. */
  expected: number
  /** In standard deviations. */
  residual: number
}

const askFrom = 4
/** With fewer there are not three others to hold one against. */
const fewestIntervals = 4
/** Stands for the use of the others where they show none, so that there is something to compare with. */
const halfUnit = 0.5

/**
 * Intervals far from what the others say: leave-one-out Pearson residual |x − μ t| ÷ √(max(1, w) μ t) above 4, μ and w
 * from the other used intervals (statistics 4.12). From 4 intervals on. An interval that ended empty tells "at least so
 * much" and is never too little.
 *
 * @param intervals miscounts merged already (`mergeNegatives`): what a neighbour takes back is nothing to ask about
 */
export function outliers(intervals: readonly DemandInterval[]): Outlier[] {
  const used = intervals.filter((i) => i.used)
  if (used.length < fewestIntervals) return []
  const sum = (of: (i: DemandInterval) => number): number => used.reduce((total, i) => total + of(i), 0)
  const all = {
    use: sum((i) => i.quantity),
    days: sum((i) => i.exposureDays),
    squares: sum((i) => i.quantity ** 2 / i.exposureDays),
  }
  return used.flatMap((i) => {
    const use = all.use - i.quantity
    const days = all.days - i.exposureDays
    const perDay = Math.max(halfUnit, use) / days
    const variance = (all.squares - i.quantity ** 2 / i.exposureDays - use ** 2 / days) / (used.length - 2)
    const expected = perDay * i.exposureDays
    const residual = (i.quantity - expected) / Math.sqrt(Math.max(1, variance / perDay) * expected)
    if (Math.abs(residual) <= askFrom || (i.censored && residual < 0)) return []
    return [{ closingOpId: i.closingOpId, quantity: i.quantity, expected, residual: Math.abs(residual) }]
  })
}
