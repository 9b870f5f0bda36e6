import { negativeBinomialQuantile } from '#shared/stats/negative-binomial-quantile.ts'
import { poissonQuantile } from '#shared/stats/poisson-quantile.ts'

/** An order line that may have come without being entered; `units` of use not yet put away. */
export interface OpenLine {
  orderLineId: string
  orderNumber: string
  units: number
  expectedOn: string | null
}

/** What is known of a place when a number is typed. Quantities in units of use, days decimal. */
export interface CountSituation {
  /** What was typed. */
  quantity: number
  last: { quantity: number; daysAgo: number } | null
  /** Net of what was recorded since that count: put away, taken, moved. */
  recordedSince: number
  meanPerDay: number | null
  variancePerDay: number | null
  capacity: number | null
  packSize: number
  openLines: readonly OpenLine[]
}

export interface UsualRange {
  from: number
  to: number
}

/**
 * A question with its numbers, for buttons that carry them. `keep` is what was typed, `instead` the number it may have
 * been meant to be. Every question can be answered by keeping the number: none is a refusal.
 */
export type CountQuestion =
  | { kind: 'first-zero'; keep: 0 }
  | { kind: 'tenfold'; keep: number; instead: number; usual: UsualRange | null }
  | { kind: 'over-capacity'; keep: number; capacity: number; usual: UsualRange | null }
  | { kind: 'rise'; keep: number; expected: number; rise: number; lines: OpenLine[] }
  | { kind: 'outside-usual'; keep: number; usual: UsualRange }

/** Two-sided share of counts that lie inside the usual range. */
const inside = 0.995

/** Units a slip by ten must be away from the usual number before it is worth a question (job page 5.3, rule b). */
const farEnough = 10

/** Factors that count as a slip by ten. */
const slip = { from: 5, to: 25 }

function useQuantile(p: number, mean: number, variance: number): number {
  if (mean <= 0) return 0
  if (variance <= mean * 1.000_001) return poissonQuantile(p, mean)
  return negativeBinomialQuantile(p, (mean * mean) / (variance - mean), mean / variance)
}

/**
 * Where 99.5 in 100 counts would lie: last count and what was recorded since, less the expected use. An estimate from
 * past use; it knows nothing of today.
 *
 * Model: use over the days since is negative binomial with mean and variance proportional to the days (Poisson when the
 * variance is not above the mean).
 * @returns null without a last count or without an estimate of use
 */
export function usualRange(situation: CountSituation): UsualRange | null {
  const { last, meanPerDay, variancePerDay, recordedSince } = situation
  if (!last || meanPerDay === null || variancePerDay === null) return null
  const days = Math.max(0, last.daysAgo)
  const base = last.quantity + recordedSince
  const use = (p: number): number => useQuantile(p, meanPerDay * days, variancePerDay * days)
  return { from: Math.max(0, base - use((1 + inside) / 2)), to: Math.max(0, base - use((1 - inside) / 2)) }
}

/** The number that one zero more or less would give, when that one fits and the typed one does not. */
function tenfold(situation: CountSituation, usual: UsualRange | null): number | null {
  const { quantity, last, recordedSince } = situation
  if (!last) return null
  const record = Math.max(0, last.quantity + recordedSince)
  const range = usual ?? { from: record, to: record }
  if (quantity >= range.from && quantity <= range.to) return null
  const middle = (range.from + range.to) / 2
  // A little above the range fits too: records run behind small deliveries, and the use may not be known yet.
  const most = range.to + Math.max(2, range.to * 0.3)
  const fits = (n: number): boolean => (n >= range.from && n <= most) || Math.abs(n - record) <= record * 0.05
  // Nearer to ten times the usual number, or to a tenth of it, than to the number itself or a hundred times.
  const factor = middle > 0 ? Math.max(quantity / middle, middle / Math.max(1, quantity)) : 1
  if (factor < slip.from || factor > slip.to) return null
  const far = (n: number): boolean => Math.abs(quantity - n) >= farEnough
  const candidates = [...(quantity > 0 && quantity % 10 === 0 ? [quantity / 10] : []), quantity * 10]
  return candidates.find((n) => n > 0 && fits(n) && far(n)) ?? null
}

/**
 * The one question that a typed number asks for, or null. At most one, the most telling first: a slip by ten, a first
 * zero, a rise that an open order may explain, more than the shelf holds, an unexplained rise, far below the usual.
 *
 * @example unusualCount({ quantity: 120, last: { quantity: 14, daysAgo: 2 }, recordedSince: 0, meanPerDay: 1, variancePerDay: 2, capacity: null, packSize: 25, openLines: [] })?.kind // => 'tenfold'
 */
export function unusualCount(situation: CountSituation): CountQuestion | null {
  const { quantity, last, recordedSince, capacity, packSize } = situation
  const usual = usualRange(situation)
  if (quantity === 0) return last?.quantity === 0 ? null : { kind: 'first-zero', keep: 0 }
  const instead = tenfold(situation, usual)
  if (instead !== null) return { kind: 'tenfold', keep: quantity, instead, usual }

  const expected = Math.max(0, (last?.quantity ?? 0) + recordedSince)
  const rise = quantity - expected
  const rises = last !== null && rise > packSize
  const lines = situation.openLines.filter((line) => line.units > 0)
  const asked: CountQuestion = { kind: 'rise', keep: quantity, expected, rise, lines }
  if (rises && lines.length > 0) return asked
  if (capacity !== null && quantity > capacity) return { kind: 'over-capacity', keep: quantity, capacity, usual }
  if (rises) return asked
  if (usual && quantity < usual.from) return { kind: 'outside-usual', keep: quantity, usual }
  return null
}
