import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { levelFor } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'
import { demandMoments } from './demand-moments.ts'
import { enteredResult } from './entered-result.ts'
import { explainPolicy } from './explain-policy.ts'
import { fitMethod } from './fit-method.ts'
import { combinedMoments, countedWastage } from './fitted.ts'
import type { Fitted, Horizon } from './fitted.ts'
import { negativeBinomialLaw } from './count-laws.ts'
import { orderQuantity } from './order-quantity.ts'
import { refused } from './policy-input-error.ts'
import { protectionLaw } from './protection-law.ts'
import type { PolicyInput } from './policy-input.ts'
import type { PolicyResult } from './policy-result.ts'
import { policyWarnings } from './policy-warnings.ts'
import { resolveInput } from './resolve-input.ts'
import type { ResolvedInput } from './resolve-input.ts'
import { demandSummary } from './demand-summary.ts'

/**
 * The reorder point, order quantity and par level of one bin, with the working.
 *
 * Smallest whole number r >= 0 of units such that demand until the next possible arrival stays at or below r with the
 * probability asked for (or the fill rate reaches it); orders are placed at or below r. Pure and synchronous: equal
 * inputs give equal results, so every stored policy can be computed again. Figures are estimates from counts.
 * Units: days and units of use. Formulas: statistics, sections 2 and 4; the input and the result are the interface's.
 *
 * @returns method `entered` with a null demand when there is no interval to learn from
 * @throws {PolicyInputError} naming each field that is unknown, out of range or does not fit the method
 */
export function reorderPoint(input: PolicyInput): PolicyResult {
  const resolved = resolveInput(input)
  const fitted = fitMethod(resolved)
  if (!fitted) return enteredResult(resolved)
  const law = protectionLaw(resolved, fitted)
  const service = serviceOf(resolved, law)
  const computed = computedLevel(resolved, law, service)
  const held = resolved.capacity === null ? computed : Math.min(computed, shelfLimit(resolved))
  const point = Math.max(resolved.pinnedFloor ?? 0, held)
  const usePerDay = fitted.meanPerDay + countedWastage(resolved.wastagePerDay, fitted.meanPerDay)
  const order = orderQuantity(resolved, usePerDay, point, (days) => lawOverLife(fitted, days))
  const textbook = textbookLevel(resolved)
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
    textbookNormal: textbook === null ? null : { reorderPoint: textbook, achieved: service(textbook) },
    warnings: policyWarnings(resolved, fitted, {
      cut: held < computed,
      floored: point > held,
      order: order.warnings,
    }),
    explanation: [],
  }
  result.explanation = explainPolicy(resolved, fitted, law, result, order.formula, plugInLevel(resolved, fitted))
  return result
}

/** A cut leaves room for one pack above the reorder point. */
function shelfLimit(input: ResolvedInput): number {
  return Math.max(0, input.capacity! - input.order.packSize)
}

/** What a level achieves in the measure asked for. Fill rate: 1 - [L(r) - L(r + Q)]/Q (statistics, 2.3). */
function serviceOf(input: ResolvedInput, law: DemandLaw): (level: number) => number {
  if (input.serviceMeasure === 'cycle') return law.cdf
  const quantity = input.order.quantity!
  return (level) => 1 - (law.loss!(level) - law.loss!(level + quantity)) / quantity
}

function computedLevel(input: ResolvedInput, law: DemandLaw, service: (level: number) => number): number {
  try {
    if (input.serviceMeasure === 'cycle') return levelFor(law, input.serviceLevel)
    return integerQuantile(service, input.serviceLevel, law.mean)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw refused(input.intervals ? '/intervals' : '/demand', 'the figures vary too much for any level to meet the aim')
  }
}

/** The shelf life is a fixed stretch of usual activity, whatever the lead time does; daily records become counts. */
function lawOverLife(fitted: Fitted, days: number): DemandLaw {
  const horizon: Horizon = { days, exposure: days, variance: 0 }
  if (fitted.method !== 'bootstrap' && fitted.method !== 'empirical') return fitted.lawOver(horizon)
  const { mean, variance } = combinedMoments(fitted.meanPerDay, fitted.variancePerDay ?? fitted.meanPerDay, horizon)
  return negativeBinomialLaw(mean, variance)
}

/** mean + z sd on the plain moments of the same data: shown beside every result for comparison (statistics, 2.2). */
function textbookLevel(input: ResolvedInput): number | null {
  const moments = input.intervals ? demandMoments(input.intervals) : input.demand!
  if (moments.variancePerDay === null) return null
  const spread = input.leadTime.sdDays * input.exposureRatio
  const { mean, variance } = combinedMoments(moments.meanPerDay, moments.variancePerDay, {
    days: input.protectionDays,
    exposure: input.protectionExposureDays,
    variance: spread * spread,
  })
  const wasted = countedWastage(input.wastagePerDay, moments.meanPerDay) * input.protectionDays
  const level = mean + wasted + normalQuantile(input.serviceLevel) * Math.sqrt(variance)
  return Math.max(0, Math.ceil(level - 1e-9))
}

/** The level the plug-in negative binomial would give: what is above it is the allowance for few counts. */
function plugInLevel(input: ResolvedInput, fitted: Fitted): number | null {
  if (fitted.method !== 'negative-binomial-mixture' || fitted.variancePerDay === null) return null
  if (input.serviceMeasure === 'fill' || input.leadTime.observedDays.length > 0) return null
  const spread = input.leadTime.sdDays * input.exposureRatio
  const horizon = { days: input.protectionDays, exposure: input.protectionExposureDays, variance: spread * spread }
  const { mean, variance } = combinedMoments(Math.max(0, fitted.meanPerDay), fitted.variancePerDay, horizon)
  return levelFor(negativeBinomialLaw(mean, variance), input.serviceLevel)
}
