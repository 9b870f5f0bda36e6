import { cyclesPerYear } from './cycles-per-year.ts'
import { fitMethod } from './fit-method.ts'
import type { PolicyInput } from './policy-input.ts'
import { policyLevels } from './policy-levels.ts'
import type { PolicyLevels } from './policy-levels.ts'
import { protectionLaw } from './protection-law.ts'
import type { DemandLaw } from './demand-law.ts'
import { resolveInput } from './resolve-input.ts'
import type { ResolvedInput } from './resolve-input.ts'

/** What one aim costs and saves, by the method of the policy: estimates. Units of use, money and years. */
export interface PriceOfLevel {
  serviceLevel: number
  reorderPoint: number
  /** Units above the mean of the protection interval */
  safetyStock: number
  orderQuantity: number
  /** The shelf is too small and cuts the reorder point */
  cut: boolean
  /** Probability that one delivery cycle does not run out */
  cycleService: number
  /** Units on the shelf on average: Q/2 + r - m + L(r); null where the method has no loss */
  meanStock: number | null
  /** Money a year for holding them: price x holding rate x mean stock; null without a price */
  holdingPerYear: number | null
  /** Delivery cycles a year: `cyclesPerYear` */
  cyclesPerYear: number
  /** Units a year asked for and not there; null where the method has no loss */
  shortPerYear: number | null
  runOutsPerYear: number
  /** null where it never runs out */
  yearsBetweenRunOuts: number | null
}

/**
 * What each of several aims would mean for one bin, so that a person can weigh stock against run-outs.
 *
 * With D units a year, Q per order, m and L(r) of the protection interval: mean stock Q/2 + r - m + L(r), units short
 * (D/Q) L(r), run-outs (D/Q)(1 - F(r)), all a year; no more cycles than chances to order. Reorder point and order quantity are those `reorderPoint` answers
 * for the same input at each aim; demand is fitted once. Source: statistics, section 5; G. Hadley & T. Whitin (1963).
 *
 * @param levels aims between 0.5 and 0.9999, answered in their order
 * @returns empty where there is nothing to learn from
 * @throws {PolicyInputError} when the input or a level cannot be used
 */
export function priceOfLevels(input: PolicyInput, levels: readonly number[]): PriceOfLevel[] {
  const inputs = levels.map((serviceLevel) => resolveInput({ ...input, serviceLevel }))
  const [first] = inputs
  const fitted = first ? fitMethod(first) : null
  if (!first || !fitted) return []
  const law = protectionLaw(first, fitted)
  return inputs.map((resolved) => priceOf(resolved, law, policyLevels(resolved, fitted, law)))
}

function priceOf(input: ResolvedInput, law: DemandLaw, levels: PolicyLevels): PriceOfLevel {
  const { point, order, usePerDay } = levels
  const { unitCost, holdingRatePerYear } = input.order
  const cycles = cyclesPerYear(usePerDay, order.units, input.reviewPeriodDays)
  const short = law.loss ? law.loss(point) : null
  const meanStock = short === null ? null : order.units / 2 + point - law.mean + short
  const cycleService = law.cdf(point)
  const runOutsPerYear = cycles * Math.max(0, 1 - cycleService)
  return {
    serviceLevel: input.serviceLevel,
    reorderPoint: point,
    safetyStock: point - law.mean,
    orderQuantity: order.units,
    cut: levels.held < levels.computed,
    cycleService,
    meanStock,
    holdingPerYear: meanStock === null || unitCost === null ? null : unitCost * holdingRatePerYear * meanStock,
    cyclesPerYear: cycles,
    shortPerYear: short === null ? null : cycles * short,
    runOutsPerYear,
    yearsBetweenRunOuts: runOutsPerYear > 0 ? 1 / runOutsPerYear : null,
  }
}
