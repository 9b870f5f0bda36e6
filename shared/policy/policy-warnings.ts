import { demandPatterns } from './demand-patterns.ts'
import { demandSummary } from './demand-summary.ts'
import type { Fitted } from './fitted.ts'
import { POLICY_WARNINGS } from './policy-result.ts'
import type { PolicyWarning } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

/** What happened to the level after it was worked out. */
export interface LevelChanges {
  cut: boolean
  floored: boolean
  order: PolicyWarning[]
}

/**
 * The warnings a fitted policy carries, in the order of the closed list.
 *
 * `planned-change`, `count-overdue`: the caller says so; unless it does, a change is planned where the days ahead are
 * not weighed as the days behind. `stated-lead-time`: no delivery was observed. `pooled`: the prior comes from like bins.
 */
export function policyWarnings(input: ResolvedInput, fitted: Fitted, changes: LevelChanges): PolicyWarning[] {
  const found = new Set<PolicyWarning>(changes.order)
  const intervals = input.intervals
  if (intervals) {
    if (!demandSummary(input, fitted).sufficient) found.add('few-intervals')
    const counted = intervals.length > 0
    if (counted && intervals.every((interval) => interval.quantity === 0)) found.add('all-zero')
    if (counted && intervals.every((interval) => interval.censored)) found.add('all-censored')
    if (input.moments) for (const pattern of demandPatterns(intervals, input.moments)) found.add(pattern)
    if (usesPool(input, fitted)) found.add('pooled')
  }
  if (input.leadTime.observedDays.length === 0) found.add('stated-lead-time')
  if (input.situation.countOverdue) found.add('count-overdue')
  if (input.situation.plannedChange) found.add('planned-change')
  if (changes.cut) found.add('shelf-cannot-hold')
  if (changes.floored) found.add('floor')
  return POLICY_WARNINGS.filter((warning) => found.has(warning))
}

function usesPool(input: ResolvedInput, fitted: Fitted): boolean {
  const { nu0, w0, rate } = input.prior
  if (fitted.method === 'gamma-poisson') return rate !== null && rate.b > 0
  return fitted.method === 'negative-binomial-mixture' && (rate !== null || nu0 !== 4 || w0 !== 2)
}
