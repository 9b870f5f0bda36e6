import { demandMoments } from './demand-moments.ts'
import { demandSummary } from './demand-summary.ts'
import type { PolicyResult, PolicyWarning } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

/**
 * The result when nothing can be worked out: no interval yet, or every interval ended empty and no pool stands in.
 *
 * The level someone entered is then used; it is not part of the input, so the figures are null unless a floor is
 * pinned. After empty endings the mean is what was used at least.
 */
export function enteredResult(input: ResolvedInput): PolicyResult {
  const intervals = input.intervals ?? []
  const none = intervals.length === 0
  const floor = input.pinnedFloor
  const quantity = floor === null ? null : Math.max(input.order.quantity ?? input.order.packSize, input.order.minimum)
  const warnings: PolicyWarning[] = [none ? 'no-data' : 'few-intervals']
  if (!none) warnings.push('all-censored')
  if (input.leadTime.observedDays.length === 0) warnings.push('stated-lead-time')
  if (floor !== null) warnings.push('floor')
  const moments = none ? null : demandMoments(intervals)
  return {
    method: 'entered',
    reorderPoint: floor,
    computedReorderPoint: null,
    safetyStock: null,
    orderQuantity: quantity,
    parLevel: floor === null || quantity === null ? null : floor + quantity,
    demand: moments && demandSummary(input, { ...moments, variancePerDay: null, dispersion: null }),
    leadTime: { meanDays: input.leadTime.meanDays, sdDays: input.leadTime.sdDays },
    reviewPeriodDays: input.reviewPeriodDays,
    protectionDays: input.protectionDays,
    protectionDemand: null,
    achieved: null,
    fillRate: null,
    readyRate: null,
    shelfCarries: null,
    dataCarry: null,
    forFewCounts: null,
    textbookNormal: null,
    warnings,
    explanation: [
      {
        label: 'Why nothing is worked out yet',
        formula: none
          ? 'no two counts to compare'
          : 'every count found the bin empty, so use is only known as at least this',
        value: none ? 'the entered level is used' : `${intervals.reduce((sum, i) => sum + i.quantity, 0)} units`,
      },
    ],
  }
}
