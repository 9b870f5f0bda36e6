import quantile from '@stdlib/stats-base-dists-normal-quantile'

/**
 * Quantile of the normal law: the z with Phi((z - mean) / sd) = p.
 *
 * Source: Abramowitz & Stegun 26.2; computed by @stdlib. Accuracy: relative error < 1e-13.
 * Fixture: `quantiles.open.json`, family normal.
 *
 * @throws {RangeError} when p is outside (0, 1) or sd is not above 0
 * @example normalQuantile(0.5, 10, 2) // => 10
 */
export function normalQuantile(p: number, mean = 0, sd = 1): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p is outside (0, 1): ${p}`)
  if (!(sd > 0 && Number.isFinite(mean))) throw new RangeError(`normal law is outside its domain: ${mean}, ${sd}`)
  return quantile(p, mean, sd)
}
