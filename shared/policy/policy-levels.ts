import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { NEARLY_POISSON, negativeBinomialLaw } from './count-laws.ts'
import { levelFor } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'
import { combinedMoments, countedWastage } from './fitted.ts'
import type { Fitted, Horizon } from './fitted.ts'
import { singleNode } from './mixture-nodes.ts'
import { mixtureLevel } from './mixture-run.ts'
import { orderQuantity } from './order-quantity.ts'
import type { OrderQuantity } from './order-quantity.ts'
import { refused } from './policy-input-error.ts'
import type { ResolvedInput } from './resolve-input.ts'

/** The levels of a policy and how each came about. Units of use. */
export interface PolicyLevels {
  /** Smallest level that meets the aim */
  computed: number
  /** The same where the shelf leaves room for one pack above it */
  held: number
  /** Never below the pinned floor */
  point: number
  order: OrderQuantity
  /** Units used or wasted per day */
  usePerDay: number
}

/**
 * Reorder point and order quantity under the law of demand over the protection interval.
 *
 * @throws {PolicyInputError} where no level meets the aim
 */
export function policyLevels(input: ResolvedInput, fitted: Fitted, law: DemandLaw): PolicyLevels {
  const computed = computedLevel(input, law)
  const held = input.capacity === null ? computed : Math.min(computed, shelfLimit(input))
  const point = Math.max(input.pinnedFloor ?? 0, held)
  const usePerDay = fitted.meanPerDay + countedWastage(input.wastagePerDay, fitted.meanPerDay)
  const order = orderQuantity(input, usePerDay, point, (days) => lawOverLife(fitted, days))
  return { computed, held, point, order, usePerDay }
}

/** A cut leaves room for one pack above the reorder point. */
function shelfLimit(input: ResolvedInput): number {
  return Math.max(0, input.capacity! - input.order.packSize)
}

/** The shelf life is a fixed stretch of usual activity, whatever the lead time does; daily records become counts. */
function lawOverLife(fitted: Fitted, days: number): DemandLaw {
  const horizon: Horizon = { days, exposure: days, variance: 0 }
  if (fitted.method !== 'bootstrap' && fitted.method !== 'empirical') return fitted.lawOver(horizon)
  const { mean, variance } = combinedMoments(fitted.meanPerDay, fitted.variancePerDay ?? fitted.meanPerDay, horizon)
  return negativeBinomialLaw(mean, variance)
}

/** What a level achieves in the measure asked for: delivery cycles that do not run out, or units served. */
export function serviceOf(input: ResolvedInput, law: DemandLaw): (level: number) => number {
  if (input.serviceMeasure === 'cycle') return law.cdf
  const quantity = input.order.quantity!
  return (level) => 1 - (law.loss!(level) - law.loss!(level + quantity)) / quantity
}

function computedLevel(input: ResolvedInput, law: DemandLaw): number {
  try {
    if (input.serviceMeasure === 'cycle') return levelFor(law, input.serviceLevel)
    return integerQuantile(serviceOf(input, law), input.serviceLevel, law.mean)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw refused(input.intervals ? '/intervals' : '/demand', 'the figures vary too much for any level to meet the aim')
  }
}

/** mean + z sd on the plain moments of the same data: shown beside every result for comparison (statistics, 2.2). */
export function textbookLevel(input: ResolvedInput): number | null {
  const moments = input.moments ?? input.demand
  if (moments === null || moments.variancePerDay === null) return null
  const { mean, variance } = combinedMoments(moments.meanPerDay, moments.variancePerDay, protectionHorizon(input))
  const wasted = countedWastage(input.wastagePerDay, moments.meanPerDay) * input.protectionDays
  const level = mean + wasted + normalQuantile(input.serviceLevel) * Math.sqrt(variance)
  return Math.max(0, Math.ceil(level - 1e-9))
}

/** The level the plug-in negative binomial would give: what is above it is the allowance for few counts. */
export function plugInLevel(input: ResolvedInput, fitted: Fitted): number | null {
  if (fitted.method !== 'negative-binomial-mixture' || fitted.variancePerDay === null) return null
  if (input.serviceMeasure === 'fill' || input.leadTime.observedDays.length > 0) return null
  const { mean, variance } = combinedMoments(
    Math.max(0, fitted.meanPerDay),
    fitted.variancePerDay,
    protectionHorizon(input),
  )
  if (mean <= 0 || variance <= mean * (1 + NEARLY_POISSON))
    return levelFor(negativeBinomialLaw(mean, variance), input.serviceLevel)
  return mixtureLevel(singleNode(mean, variance / mean), input.serviceLevel, variance)
}

/**
 * The highest aim counts like these could confirm by themselves, where use is lumpy or comes in runs and no model
 * stands in: m/(m + 1) for m protection intervals seen, the share in which the next stays below the largest of m.
 * Source: statistics, 2.7.
 */
export function dataCarry(input: ResolvedInput): number | null {
  if (input.moments === null || input.protectionExposureDays <= 0) return null
  const windows = input.moments.exposureDays / input.protectionExposureDays
  return windows / (windows + 1)
}

function protectionHorizon(input: ResolvedInput): Horizon {
  const spread = input.leadTime.sdDays * input.exposureRatio
  return { days: input.protectionDays, exposure: input.protectionExposureDays, variance: spread * spread }
}
