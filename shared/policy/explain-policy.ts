import type { DemandLaw } from './demand-law.ts'
import { figure } from './figure.ts'
import { countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import type { OrderQuantity } from './order-quantity.ts'
import type { ExplanationRow, PolicyResult } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

const row = (label: string, formula: string, value: string): ExplanationRow => ({ label, formula, value })
const percent = (share: number) => `${figure(share * 100)} %`
const roughly = (share: number) => `${figure(share * 100, 0)} %`

/**
 * The working of a policy as rows of label, formula with the figures put in, and value; quantities in units of use.
 * Labels are unique within one policy.
 */
export function explainPolicy(
  input: ResolvedInput,
  fitted: Fitted,
  law: DemandLaw,
  result: PolicyResult,
  order: OrderQuantity,
): ExplanationRow[] {
  const rows = [...explainDemand(input, fitted, result), ...explainProtection(input, fitted, law)]
  const computed = result.computedReorderPoint!
  rows.push(row('Aim', aimInOdds(input), percent(input.serviceLevel)))
  rows.push(row('Method', fitted.model, result.method))
  rows.push(row('Lowest level that meets the aim', stepAt(input, law, computed), figure(computed)))
  const { forFewCounts } = result
  if (forFewCounts) {
    const formula = `${figure(computed)} − ${figure(computed - forFewCounts)}`
    rows.push(row('Kept for what few counts leave open', formula, figure(forFewCounts)))
  }
  rows.push(...explainLevels(input, result, order))
  return rows
}

/** How often it runs out, said in odds: one in 1/(1 - p). */
function aimInOdds(input: ResolvedInput): string {
  const odds = figure(1 / (1 - input.serviceLevel), 0)
  return input.serviceMeasure === 'fill'
    ? `about 1 unit in ${odds} short`
    : `about 1 delivery cycle in ${odds} runs out`
}

function explainDemand(input: ResolvedInput, fitted: Fitted, result: PolicyResult): ExplanationRow[] {
  const rows: ExplanationRow[] = []
  const perDay = figure(fitted.meanPerDay, 3)
  if (!input.intervals) rows.push(row('Use per day', 'taken as known', perDay))
  else if (input.intervals.length === 0) {
    const { a, b } = input.prior.rate!
    const formula = `no counts yet; like wards used about ${figure(a)} units / ${figure(b)} days`
    rows.push(row('Use per day', formula, perDay))
  } else {
    const units = input.intervals.reduce((sum, interval) => sum + interval.quantity, 0)
    const exposure = input.intervals.reduce((sum, interval) => sum + interval.exposureDays, 0)
    const notes = [
      result.demand!.censoredIntervals > 0
        ? `${result.demand!.censoredIntervals} ended empty and count as at least`
        : '',
      input.intervals.some((interval) => interval.weight !== input.intervals![0]!.weight)
        ? 'recent counts weigh more'
        : '',
    ].filter(Boolean)
    const tail = notes.length > 0 ? ` (${notes.join('; ')})` : ''
    rows.push(row('Use per day', `${figure(units)} units / ${figure(exposure)} days${tail}`, perDay))
  }
  if (fitted.likeWards) {
    const { own, theirsPerDay, perDay: both } = fitted.likeWards
    const formula = `your counts weigh ${roughly(own)}, like wards (${figure(theirsPerDay, 3)} a day) ${roughly(1 - Math.round(own * 100) / 100)}`
    rows.push(row('Where the figures come from', formula, `${figure(both, 3)} a day`))
  }
  if (fitted.variancePerDay !== null && fitted.dispersion !== null) {
    const formula = `variance ${figure(fitted.variancePerDay, 3)} / mean ${perDay}`
    rows.push(row('How uneven the use is', formula, figure(fitted.dispersion)))
  }
  return rows
}

function explainProtection(input: ResolvedInput, fitted: Fitted, law: DemandLaw): ExplanationRow[] {
  const { meanDays, sdDays, observedDays } = input.leadTime
  const lead = sdDays > 0 ? `${figure(meanDays)} (spread ${figure(sdDays)})` : figure(meanDays)
  const observed = observedDays.length > 0 ? `; ${observedDays.length} lead times seen` : ''
  const rows = [
    row(
      'Days to cover',
      `lead time ${lead} + until the next order ${figure(input.reviewPeriodDays)}${observed}`,
      figure(input.protectionDays),
    ),
  ]
  if (input.exposureRatio !== 1) {
    const formula = `${figure(input.protectionDays)} days × ${figure(input.exposureRatio)} of usual activity`
    rows.push(row('Days of usual use in them', formula, figure(input.protectionExposureDays)))
  }
  const wastage = countedWastage(input.wastagePerDay, fitted.meanPerDay)
  const wasted = wastage > 0 ? ` + wasted ${figure(wastage, 3)} a day` : ''
  const formula = `${figure(input.protectionExposureDays)} days × ${figure(fitted.meanPerDay, 3)}${wasted}, as the method sees it`
  rows.push(row('Expected use in them', formula, figure(law.mean)))
  return rows
}

function stepAt(input: ResolvedInput, law: DemandLaw, level: number): string {
  if (input.serviceMeasure === 'fill')
    return `smallest level whose share of units served reaches ${percent(input.serviceLevel)}`
  const reached = `${percent(law.cdf(level))} at ${figure(level)}`
  return level > 0 ? `${percent(law.cdf(level - 1))} at ${figure(level - 1)}, ${reached}` : reached
}

function explainLevels(input: ResolvedInput, result: PolicyResult, order: OrderQuantity): ExplanationRow[] {
  const rows: ExplanationRow[] = []
  const point = result.reorderPoint!
  if (point !== result.computedReorderPoint) {
    const held = input.capacity === null ? '' : `shelf ${input.capacity} − one pack ${input.order.packSize}`
    const floor = input.pinnedFloor === null ? '' : `never below ${input.pinnedFloor}`
    rows.push(row('Reorder point', [held, floor].filter(Boolean).join('; '), figure(point)))
  } else rows.push(row('Reorder point', 'order at or below this', figure(point)))
  const mean = result.protectionDemand!.mean
  rows.push(row('Safety stock', `${figure(point)} − ${figure(mean)}`, figure(result.safetyStock!)))
  rows.push(...explainOrder(order))
  rows.push(row('Par level', `${figure(point)} + ${figure(result.orderQuantity!)}`, figure(result.parLevel!)))
  const measure = input.serviceMeasure === 'fill' ? 'units served' : 'delivery cycles that do not run out'
  rows.push(row('Expected of this level', `share of ${measure}, an estimate`, percent(result.achieved!)))
  if (result.textbookNormal) {
    const { reorderPoint, achieved } = result.textbookNormal
    const formula = `mean + z × standard deviation gives ${figure(reorderPoint)}; by the method above that reaches`
    rows.push(row('Textbook normal', formula, percent(achieved)))
  }
  return rows
}

const boundLabel: Record<OrderQuantity['bounds'][number]['bound'], string> = {
  minimum: 'Raised to the smallest order',
  shelf: 'Kept within the shelf',
  'shelf-life': 'Kept within the shelf life',
}

/** The quantity first wanted, then each bound that changed it. */
function explainOrder(order: OrderQuantity): ExplanationRow[] {
  const rows = order.bounds.map(({ bound, formula, units }) => row(boundLabel[bound], formula, figure(units)))
  return [row('Order quantity', order.formula, figure(order.wanted)), ...rows]
}
