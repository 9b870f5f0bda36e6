import { integerQuantile } from './integer-quantile.ts'
import { negativeBinomialCdf } from './negative-binomial-cdf.ts'
import { normalQuantile } from './normal-quantile.ts'

/**
 * Smallest integer r with negative-binomial CDF(r) >= p, for real size k and success probability q.
 *
 * Source: definition; tie rule of `integerQuantile`. Accuracy: exact integer unless p lies within 1e-12 of a step.
 * Fixture: `quantiles.open.json`, family negbin.
 *
 * @throws {RangeError} when p is outside (0, 1), size not above 0 or probability outside (0, 1]
 * @example negativeBinomialQuantile(0.5, 1000, 0.5) // => 999
 */
export function negativeBinomialQuantile(p: number, size: number, probability: number): number {
  const mean = (size * (1 - probability)) / probability
  const guess = mean + normalQuantile(p) * Math.sqrt(mean / probability)
  return integerQuantile((r) => negativeBinomialCdf(r, size, probability), p, guess)
}
