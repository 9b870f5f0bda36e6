/** A tail of a law with a larger standard deviation is not added up term by term: it would take too long. */
export const WIDEST_TAIL = 1e5

/**
 * Sum of (y - r) f(y) over the integers y above r, for a law whose masses follow f(y + 1) = f(y) ratio(y).
 *
 * All terms are positive, so nothing cancels however far out r lies. Shape: `firstMass` = f(floor(r) + 1); the ratio
 * must fall below 1 beyond r. Source: definition of the loss function. Accuracy: relative error < 1e-12.
 *
 * @returns units
 */
export function tailLoss(r: number, firstMass: number, ratio: (y: number) => number): number {
  let mass = firstMass
  let sum = 0
  for (let y = Math.floor(r) + 1; mass > 0; y++) {
    const term = (y - r) * mass
    sum += term
    const next = ratio(y)
    // Stop when a geometric bound on what is left no longer counts.
    if (next < 1 && term * next < sum * 1e-17 * (1 - next) * (1 - next)) break
    mass *= next
  }
  return sum
}
