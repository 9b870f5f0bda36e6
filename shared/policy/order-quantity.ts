import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import type { DemandLaw } from './demand-law.ts'
import type { PolicyWarning } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

const DAYS_PER_YEAR = 365
/** Probability with which what stands on the shelf after an arrival should be used before its date. */
const USED_IN_TIME = 0.95

/** How much to order at a time, in units, with the reason and what bent it. */
export interface OrderQuantity {
  units: number
  formula: string
  warnings: PolicyWarning[]
}

/**
 * Units to order at a time: the given quantity; else the economic order quantity in whole packs when ordering and
 * unit cost are known; else the fewest packs that cover the mean use of one review period. Then minimum, shelf, shelf
 * life, in that order, always at least one pack.
 *
 * EOQ in packs of u: smallest n with n (n + 1) u^2 >= 2 D S/h, D per year, S per order, h = price x holding rate.
 * `lawOverLife` is the law of demand over the shelf life, asked for only when there is one.
 * Source: F. W. Harris, Factory 10 (1913); statistics, section 5.
 */
export function orderQuantity(
  input: ResolvedInput,
  usePerDay: number,
  reorderPoint: number,
  lawOverLife: (days: number) => DemandLaw,
): OrderQuantity {
  const start = wanted(input, Math.max(0, usePerDay))
  const pack = input.order.packSize
  const warnings: PolicyWarning[] = []
  let units = start.units
  const { minimum } = input.order
  if (units < minimum) {
    units = Math.ceil(minimum / pack) * pack
    warnings.push('minimum-order')
  }
  if (input.capacity !== null && reorderPoint + units > input.capacity) {
    const room = Math.floor((input.capacity - reorderPoint) / pack) * pack
    if (room < pack) warnings.push('shelf-cannot-hold')
    units = Math.max(pack, room)
  }
  if (input.shelfLifeDays !== null) {
    const usedUp = integerQuantile(lawOverLife(input.shelfLifeDays).cdf, 1 - USED_IN_TIME)
    if (reorderPoint + units > usedUp) {
      const fits = Math.floor((usedUp - reorderPoint) / pack) * pack
      units = Math.min(units, Math.max(pack, fits))
      warnings.push('expiry-cap')
    }
  }
  if (units < minimum && !warnings.includes('minimum-order')) warnings.push('minimum-order')
  return { units, formula: start.formula, warnings }
}

function wanted(input: ResolvedInput, usePerDay: number): { units: number; formula: string } {
  const { order } = input
  if (order.quantity !== null) return { units: order.quantity, formula: 'the quantity given' }
  const pack = order.packSize
  const holding = (order.unitCost ?? 0) * order.holdingRatePerYear
  if (order.orderingCost !== null && order.orderingCost > 0 && holding > 0) {
    const target = (2 * usePerDay * DAYS_PER_YEAR * order.orderingCost) / holding
    return {
      units: economicPacks(target, pack) * pack,
      formula: `fewest packs of ${pack} with n(n + 1) × ${pack}² ≥ 2 × ${round(usePerDay * DAYS_PER_YEAR)} a year × ${order.orderingCost} / (${order.unitCost} × ${order.holdingRatePerYear})`,
    }
  }
  const packs = Math.max(1, Math.ceil((usePerDay * input.reviewPeriodDays) / pack - 1e-9))
  return {
    units: packs * pack,
    formula: `fewest packs of ${pack} that cover ${round(usePerDay)} a day × ${round(input.reviewPeriodDays)} days`,
  }
}

/** Smallest n >= 1 with n (n + 1) u^2 >= target, from the positive root of the quadratic. */
function economicPacks(target: number, pack: number): number {
  const ratio = target / (pack * pack)
  let packs = Math.max(1, Math.floor((Math.sqrt(1 + 4 * ratio) - 1) / 2) - 1)
  while (packs * (packs + 1) < ratio * (1 - 1e-12)) packs++
  return packs
}

function round(value: number): number {
  return Math.round(value * 100) / 100
}
