import { integerQuantile, TIE_GUARD } from '#shared/stats/integer-quantile.ts'
import type { DemandLaw } from './demand-law.ts'
import type { PolicyWarning } from './policy-result.ts'
import type { ResolvedInput } from './resolve-input.ts'

export const DAYS_PER_YEAR = 365
/** Probability with which what stands on the shelf after an arrival should be used before its date. */
const USED_IN_TIME = 0.95

/** How much to order at a time, in units, with the reason and what bent it. */
export interface OrderQuantity {
  units: number
  /** Units before any bound, and where they come from */
  wanted: number
  formula: string
  /** Each bound that changed the quantity, in the order of use, and the quantity after it. */
  bounds: { bound: 'minimum' | 'shelf' | 'shelf-life'; formula: string; units: number }[]
  warnings: PolicyWarning[]
}

/**
 * Units to order at a time: the given quantity; else the economic order quantity in whole packs when ordering and
 * unit cost are known; else the fewest packs that cover the mean use of one review period. Then minimum, shelf, shelf
 * life, in that order, always at least one pack.
 *
 * EOQ in packs of u: smallest n with n (n + 1) u^2 >= 2 D S/h, D per year, S per order, h = price x holding rate.
 * Shelf life of H days: r + Q at most the low quantile of use in H days, so that all is used in time with 95 %.
 * `lawOverLife` is the law of demand over the shelf life, asked for only when there is one.
 * Source: F. W. Harris, Factory 10 (1913); G. Hadley & T. Whitin (1963) for whole units; statistics, section 5.
 */
export function orderQuantity(
  input: ResolvedInput,
  usePerDay: number,
  reorderPoint: number,
  lawOverLife: (days: number) => DemandLaw,
): OrderQuantity {
  const { units, formula } = wanted(input, Math.max(0, usePerDay))
  const order: OrderQuantity = { units, wanted: units, formula, bounds: [], warnings: [] }
  raiseToMinimum(order, input)
  fitShelf(order, input, reorderPoint)
  fitShelfLife(order, input, reorderPoint, lawOverLife)
  if (order.units < input.order.minimum && !order.warnings.includes('minimum-order'))
    order.warnings.push('minimum-order')
  return order
}

function raiseToMinimum(order: OrderQuantity, { order: { packSize, minimum } }: ResolvedInput): void {
  if (order.units >= minimum) return
  order.warnings.push('minimum-order')
  bend(order, 'minimum', `at least ${minimum}, in packs of ${packSize}`, Math.ceil(minimum / packSize) * packSize)
}

function fitShelf(order: OrderQuantity, input: ResolvedInput, reorderPoint: number): void {
  const { capacity } = input
  const pack = input.order.packSize
  if (capacity === null || reorderPoint + order.units <= capacity) return
  const room = Math.floor((capacity - reorderPoint) / pack) * pack
  if (room < pack) order.warnings.push('shelf-cannot-hold')
  bend(order, 'shelf', `whole packs of ${pack} in the shelf's ${capacity} − ${reorderPoint}`, Math.max(pack, room))
}

function fitShelfLife(
  order: OrderQuantity,
  input: ResolvedInput,
  reorderPoint: number,
  lawOverLife: (days: number) => DemandLaw,
): void {
  if (input.shelfLifeDays === null) return
  const law = lawOverLife(input.shelfLifeDays)
  // One question first: the low quantile of a long shelf life is far away and costs more than all else.
  if (law.cdf(reorderPoint + order.units - 1) < (1 - USED_IN_TIME) * TIE_GUARD) return
  const pack = input.order.packSize
  const usedUp = integerQuantile(law.cdf, 1 - USED_IN_TIME)
  if (reorderPoint + order.units <= usedUp) return
  order.warnings.push('expiry-cap')
  const fits = Math.floor((usedUp - reorderPoint) / pack) * pack
  const formula = `${usedUp} are used in ${input.shelfLifeDays} days with 95 %; packs of ${pack} above ${reorderPoint}`
  bend(order, 'shelf-life', formula, Math.min(order.units, Math.max(pack, fits)))
}

function bend(
  order: OrderQuantity,
  bound: OrderQuantity['bounds'][number]['bound'],
  formula: string,
  units: number,
): void {
  order.units = units
  order.bounds.push({ bound, formula, units })
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
