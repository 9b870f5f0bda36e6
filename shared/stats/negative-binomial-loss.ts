import { negativeBinomialMass } from './negative-binomial-mass.ts'
import { negativeBinomialUpperTail } from './negative-binomial-upper-tail.ts'
import { tailLoss, WIDEST_TAIL } from './tail-loss.ts'

/**
 * Expected units short E[(D - r)+] when demand is negative binomial with real size k and success probability q.
 *
 * Formula: (m - r)(1 - F(r)) + (r + k) beta f(r), beta = m/k = (1 - q)/q; above the mean the positive terms
 * (y - r) f(y) are added up instead, since the closed form cancels there.
 * Source: P. Zipkin, Foundations of Inventory Management (2000), App. C. Accuracy: relative error < 1e-10.
 * Fixture: `loss.json`, family negbin.
 *
 * @returns units
 * @throws {RangeError} when size is not above 0 or probability outside (0, 1]
 */
export function negativeBinomialLoss(r: number, size: number, probability: number): number {
  const beta = (1 - probability) / probability
  const mean = size * beta
  if (r <= 0) return mean - r
  const whole = Math.floor(r)
  if (whole >= mean && mean / probability < WIDEST_TAIL * WIDEST_TAIL) {
    const first = negativeBinomialMass(whole + 1, size, probability)
    return tailLoss(r, first, (y) => ((size + y) / (y + 1)) * (1 - probability))
  }
  const upper = negativeBinomialUpperTail(whole, size, probability)
  return Math.max(0, (mean - r) * upper + (whole + size) * beta * negativeBinomialMass(whole, size, probability))
}
