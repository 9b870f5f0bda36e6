import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { FoldedRow } from '#shared/ledger/fold.ts'
import type { LedgerRow } from '#shared/ledger/movement.ts'
import { countRhythm } from './count-rhythm.ts'
import type { DemandEvent, DemandInterval } from './demand-events.ts'
import { cutIntervals, type IntervalOptions } from './demand-intervals.ts'
import { withExtraUnits } from './extra-units.ts'
import { forget } from './forget.ts'
import { mergeNegatives } from './merge-negatives.ts'
import { mergeOverflow } from './merge-overflow.ts'
import { outliers, type Outlier } from './outliers.ts'
import { asPolicyIntervals, wastageRate } from './policy-intervals.ts'

const dayMs = 86_400_000

/** What one assignment of a bin teaches. */
export interface LearnedDemand {
  /** Every interval, used or not, oldest first. */
  intervals: DemandInterval[]
  /** What the policy learns from. */
  forPolicy: NonNullable<PolicyInput['intervals']>
  wastagePerDay: number
  /** Units used on a usual day, planned extra units apart: turns extra units ahead into days. Null: nothing learned. */
  basePerDay: number | null
  /** Intervals to ask about; they are used all the same. */
  outliers: Outlier[]
  /** Days to expect between counts. */
  rhythmDays: number
  /** Epoch ms and id of the last standing count. */
  lastCount: { at: number; opId: string } | null
}

/**
 * Folded ledgers → demand process, all of section 4.0 that needs no other bin.
 *
 * @param rows of the place itself
 * @param overflow of its overflow places: their use is its use
 */
export function learnDemand(
  rows: readonly FoldedRow<LedgerRow>[],
  options: IntervalOptions & { plannedRhythmDays: number },
  overflow: readonly (readonly FoldedRow<LedgerRow>[])[] = [],
): LearnedDemand {
  const own = eventsOf(rows)
  const cut = withExtraUnits(cutIntervals(mergeOverflow([own, ...overflow.map(eventsOf)]), options))
  const intervals = forget(cut.intervals)
  const merged = mergeNegatives(intervals)
  const last = own.findLast((e) => e.type === 'count')
  return {
    intervals: intervals.map((i) => (merged.mergedIds.has(i.closingOpId) ? { ...i, why: 'merged' } : i)),
    forPolicy: asPolicyIntervals(merged.intervals),
    wastagePerDay: wastageRate(intervals),
    basePerDay: cut.basePerDay,
    outliers: outliers(merged.intervals),
    rhythmDays: countRhythm(gapsOf(intervals), options.plannedRhythmDays),
    lastCount: last ? { at: last.effectiveAt, opId: last.opId } : null,
  }
}

const eventsOf = (rows: readonly FoldedRow<LedgerRow>[]): DemandEvent[] =>
  rows
    .filter((f) => f.voidedBy === null)
    .map((f) => ({ opId: f.row.opId, type: f.row.type, quantity: f.row.quantity, effectiveAt: f.row.effectiveAt }))

/** Gaps between counts that are counts of their own: a recount 20 minutes later is no rhythm. */
const gapsOf = (intervals: readonly DemandInterval[]): number[] =>
  intervals.map((i) => (i.closedAt - i.openedAt) / dayMs)
