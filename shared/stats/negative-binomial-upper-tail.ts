import { incompleteBeta } from './incomplete-beta.ts'

/**
 * P(D > x) under the negative-binomial law with real size k and success probability q, with relative precision far
 * out: 1 - I_q(k, floor(x) + 1).
 *
 * Source: Abramowitz & Stegun 26.5.26. Accuracy: relative error < 1e-11.
 *
 * @throws {RangeError} when size is not above 0 or probability outside (0, 1]
 * @example negativeBinomialUpperTail(-1, 2, 0.5) // => 1
 */
export function negativeBinomialUpperTail(x: number, size: number, probability: number): number {
  if (!(size > 0 && Number.isFinite(size) && probability > 0 && probability <= 1))
    throw new RangeError(`negative-binomial law is outside its domain: ${size}, ${probability}`)
  if (x < 0) return 1
  return incompleteBeta(probability, 1 - probability, size, Math.floor(x) + 1).upper
}
