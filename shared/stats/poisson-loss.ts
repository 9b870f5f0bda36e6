import { incompleteGamma } from './incomplete-gamma.ts'
import { poissonMass } from './poisson-mass.ts'
import { tailLoss, WIDEST_TAIL } from './tail-loss.ts'

/**
 * Expected units short E[(D - r)+] when demand is Poisson.
 *
 * Formula: (m - r)(1 - F(r)) + m f(r). Above the mean both terms nearly cancel, so there the positive terms
 * (y - r) f(y) are added up instead.
 * Source: P. Zipkin, Foundations of Inventory Management (2000), App. C; table: Cachon & Terwiesch, Matching Supply
 * with Demand, p. 431. Accuracy: relative error < 1e-10. Fixture: `loss.json`, family poisson.
 *
 * @returns units
 * @throws {RangeError} when mean is negative
 * @example poissonLoss(0, 1.25) // => 1.25
 */
export function poissonLoss(r: number, mean: number): number {
  if (!(mean >= 0 && Number.isFinite(mean))) throw new RangeError(`mean is outside its domain: ${mean}`)
  if (r <= 0) return mean - r
  if (mean === 0) return 0
  const whole = Math.floor(r)
  if (whole >= mean && mean < WIDEST_TAIL * WIDEST_TAIL)
    return tailLoss(r, poissonMass(whole + 1, mean), (y) => mean / (y + 1))
  return Math.max(0, (mean - r) * incompleteGamma(whole + 1, mean).lower + mean * poissonMass(whole, mean))
}
