import { integerQuantile } from './integer-quantile.ts'
import { normalQuantile } from './normal-quantile.ts'
import { poissonCdf } from './poisson-cdf.ts'

/**
 * Smallest integer r with Poisson CDF(r) >= p.
 *
 * Source: definition; tie rule of `integerQuantile`. Accuracy: exact integer unless p lies within 1e-12 of a step.
 * Fixture: `quantiles.open.json`, family poisson.
 *
 * @throws {RangeError} when p is outside (0, 1) or mean is negative
 * @example poissonQuantile(0.95, 6) // => 10
 */
export function poissonQuantile(p: number, mean: number): number {
  const guess = mean + normalQuantile(p) * Math.sqrt(mean)
  return integerQuantile((r) => poissonCdf(r, mean), p, guess)
}
