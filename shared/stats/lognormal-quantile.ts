import { normalQuantile } from './normal-quantile.ts'

/**
 * Quantile of the lognormal law: exp(meanLog + z_p sdLog).
 *
 * Source: Johnson, Kotz & Balakrishnan, Continuous Univariate Distributions 1 (1994), ch. 14. Accuracy: relative
 * error < 1e-12. Fixture: `quantiles.open.json`, family lognormal.
 *
 * @throws {RangeError} when p is outside (0, 1) or sdLog is not above 0
 * @example lognormalQuantile(0.5, 0, 1) // => 1
 */
export function lognormalQuantile(p: number, meanLog: number, sdLog: number): number {
  return Math.exp(normalQuantile(p, meanLog, sdLog))
}
