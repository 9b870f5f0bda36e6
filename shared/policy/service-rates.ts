import type { DemandLaw } from './demand-law.ts'

/** Values this near to 1 no longer count in a ready rate. */
const NEARLY_ALL = 1 - 1e-10

/**
 * Share of units served from the shelf, orders of Q placed at r: 1 - [L(r) - L(r + Q)]/Q.
 *
 * Units are taken one at a time and unmet demand waits; where many go at once the true share is lower.
 * Source: statistics, 2.3.
 *
 * @returns null where the law has no loss function
 */
export function fillRate(law: DemandLaw, level: number, quantity: number): number | null {
  // The loss of a whole-number law falls by 1 - F(y) from y to y + 1: the mean of F over the steps is the same figure.
  if (!law.exactQuantile && law.loss) return readyRate(law, level, quantity)
  return law.loss ? 1 - (law.loss(level) - law.loss(level + quantity)) / quantity : null
}

/**
 * Share of time with stock on the shelf, orders of Q placed at r: (1/Q) sum of F(y) for y = r to r + Q - 1.
 *
 * The position is as often at each of r + 1 to r + Q. For whole-number laws this is the fill rate of units taken one at
 * a time. Source: statistics, 2.4; S. Axsater, Inventory Control, ch. 5.
 *
 * @returns null where the law has no loss function
 */
export function readyRate(law: DemandLaw, level: number, quantity: number): number | null {
  if (!law.loss) return null
  let sum = 0
  for (let y = level; y < level + quantity; y++) {
    const reached = law.cdf(y)
    if (reached >= NEARLY_ALL) {
      sum += level + quantity - y
      break
    }
    sum += reached
  }
  return sum / quantity
}
