import { demandSummary } from './demand-summary.ts'
import { enteredResult } from './entered-result.ts'
import { explainPolicy } from './explain-policy.ts'
import { fitMethod } from './fit-method.ts'
import { dataCarry, plugInLevel, policyLevels, serviceOf, textbookLevel } from './policy-levels.ts'
import type { PolicyInput } from './policy-input.ts'
import type { PolicyResult } from './policy-result.ts'
import { policyWarnings } from './policy-warnings.ts'
import { protectionLaw } from './protection-law.ts'
import { resolveInput } from './resolve-input.ts'
import { fillRate, readyRate } from './service-rates.ts'

/**
 * The reorder point, order quantity and par level of one bin, with the working.
 *
 * Smallest whole number r >= 0 of units such that demand until the next possible arrival stays at or below r with the
 * probability asked for (or the fill rate reaches it); orders are placed at or below r. Pure and synchronous: equal
 * inputs give equal results, so every stored policy can be computed again. Figures are estimates from counts.
 * Units: days and units of use. Formulas: statistics, sections 2 and 4; the input and the result are the interface's.
 *
 * @returns method `entered` where there is nothing to learn from, neither counts nor the rate of like wards
 * @throws {PolicyInputError} naming each field that is unknown, out of range or does not fit the method
 */
export function reorderPoint(input: PolicyInput): PolicyResult {
  const resolved = resolveInput(input)
  const fitted = fitMethod(resolved)
  if (!fitted) return enteredResult(resolved)
  const law = protectionLaw(resolved, fitted)
  const service = serviceOf(resolved, law)
  const { computed, held, point, order } = policyLevels(resolved, fitted, law)
  const textbook = textbookLevel(resolved)
  const plugIn = plugInLevel(resolved, fitted)
  const cut = held < computed
  const warnings = policyWarnings(resolved, fitted, { cut, floored: point > held, order: order.warnings })
  const unsteady = warnings.includes('lumpy') || warnings.includes('autocorrelated')
  const result: PolicyResult = {
    method: fitted.method,
    reorderPoint: point,
    computedReorderPoint: computed,
    safetyStock: point - law.mean,
    orderQuantity: order.units,
    parLevel: point + order.units,
    demand: demandSummary(resolved, fitted),
    leadTime: { meanDays: resolved.leadTime.meanDays, sdDays: resolved.leadTime.sdDays },
    reviewPeriodDays: resolved.reviewPeriodDays,
    protectionDays: resolved.protectionDays,
    protectionDemand: { mean: law.mean, variance: law.variance },
    achieved: service(point),
    fillRate: fillRate(law, point, order.units),
    readyRate: readyRate(law, point, order.units),
    shelfCarries: cut ? service(held) : null,
    dataCarry: unsteady ? dataCarry(resolved) : null,
    forFewCounts: plugIn === null ? null : computed - plugIn,
    textbookNormal: textbook === null ? null : { reorderPoint: textbook, achieved: service(textbook) },
    warnings,
    explanation: [],
  }
  result.explanation = explainPolicy(resolved, fitted, law, result, order)
  return result
}
