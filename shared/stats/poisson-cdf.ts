import { incompleteGamma } from './incomplete-gamma.ts'

/**
 * Distribution function of the Poisson law: Q(floor(x) + 1, mean).
 *
 * jStat's own `poisson.cdf` overflows from a mean of about 100 on and is not used.
 * Source: Abramowitz & Stegun 26.4.21. Accuracy: absolute error < 1e-12 for means up to 1e7.
 * Fixture: `quantiles.open.json`, family poisson.
 *
 * @throws {RangeError} when mean is negative or not finite
 * @example poissonCdf(0, 0) // => 1
 */
export function poissonCdf(x: number, mean: number): number {
  if (!(mean >= 0 && Number.isFinite(mean))) throw new RangeError(`mean is outside its domain: ${mean}`)
  if (x < 0) return 0
  return mean === 0 ? 1 : incompleteGamma(Math.floor(x) + 1, mean).upper
}
