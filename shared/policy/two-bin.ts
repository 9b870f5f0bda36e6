import type { PolicyInput } from './policy-input.ts'
import { reorderPoint } from './reorder-point.ts'

/** Sizes of a two-bin place: staff take from the front bin; its emptying is the order, and the reserve lasts till then. */
export interface TwoBinSize {
  /** Units the reserve must hold, in whole packs */
  perBin: number
  /** Units in the front bin: one order fills it. More than `perBin` where a larger order is cheaper */
  front: number
  reserve: number
  total: number
  /** Both bins have the same size */
  equal: boolean
  /** What the place can hold is enough; true where no capacity is given */
  fits: boolean
}

/**
 * How large the two bins of a kanban place must be.
 *
 * B = u ceil(F^-1(p)/u) in packs of u, over the longest time from an emptied bin to the refilled one on the shelf: the
 * review period of the input is the collection round, its lead time the delivery. Both bins hold B, and each order is
 * B; where the economic or smallest order is larger, the front bin takes that and the reserve stays B. A pinned floor
 * counts as need. At least one pack each.
 * Source: statistics, section 5 (M. Rosales, M. Magazine & U. Rao, EJOR 2015, for the system).
 *
 * @returns null where there is nothing to learn from
 * @throws {PolicyInputError} when the input cannot be read
 */
export function twoBinSize(input: PolicyInput): TwoBinSize | null {
  const { reorderPoint: need, orderQuantity } = reorderPoint({ ...input, capacity: null })
  if (need === null || orderQuantity === null) return null
  const pack = input.order?.packSize ?? 1
  const perBin = Math.max(1, Math.ceil(need / pack)) * pack
  const front = Math.max(perBin, largerOrder(input, orderQuantity))
  const total = front + perBin
  const fits = input.capacity == null || total <= input.capacity
  return { perBin, front, reserve: perBin, total, equal: front === perBin, fits }
}

/** The order a front bin should take at once, where costs or a minimum ask for one. */
function largerOrder({ order }: PolicyInput, orderQuantity: number): number {
  const weighed = (order?.orderingCost ?? 0) > 0 && (order?.unitCost ?? 0) > 0
  if (weighed || order?.quantity != null) return orderQuantity
  const pack = order?.packSize ?? 1
  return Math.ceil((order?.minimum ?? 0) / pack) * pack
}
