import { incompleteGamma } from './incomplete-gamma.ts'
import { poissonMass } from './poisson-mass.ts'

/**
 * Expected units short E[(D - r)+] when demand is gamma with shape a and scale s.
 *
 * Formula: a s (1 - F_{a+1}(r)) - r (1 - F_a(r)) = (a s - r) Q(a, r/s) + a s g, g = (r/s)^a e^{-r/s} / Gamma(a+1).
 * Source: P. Zipkin, Foundations of Inventory Management (2000), App. C. Accuracy: relative error < 1e-9 down to
 * losses of 1e-12 units. Fixture: `loss.json`, family gamma.
 *
 * @returns units
 * @throws {RangeError} when shape or scale is not above 0
 */
export function gammaLoss(r: number, shape: number, scale: number): number {
  if (!(shape > 0 && scale > 0)) throw new RangeError(`gamma law is outside its domain: ${shape}, ${scale}`)
  const mean = shape * scale
  if (r <= 0) return mean - r
  const x = r / scale
  return Math.max(0, (mean - r) * incompleteGamma(shape, x).upper + mean * poissonMass(shape, x))
}
