import quantile from '@stdlib/stats-base-dists-t-quantile'
import { normalQuantile } from './normal-quantile.ts'

/**
 * Quantile of Student's t law with real degrees of freedom.
 *
 * Above 1e9 degrees of freedom the normal quantile stands in (difference below 1e-9).
 * Source: computed by @stdlib; W. S. Gosset, Biometrika 6 (1908). Accuracy: relative error < 1e-12.
 * Fixture: `quantiles.open.json`, family t.
 *
 * @throws {RangeError} when p is outside (0, 1) or the degrees of freedom are not above 0
 * @example studentQuantile(0.5, 3) // => 0
 */
export function studentQuantile(p: number, degreesOfFreedom: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p is outside (0, 1): ${p}`)
  if (!(degreesOfFreedom > 0)) throw new RangeError(`degrees of freedom outside their domain: ${degreesOfFreedom}`)
  if (degreesOfFreedom > 1e9) return normalQuantile(p)
  return quantile(p, degreesOfFreedom)
}
