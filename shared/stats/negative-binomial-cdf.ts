import { incompleteBeta } from './incomplete-beta.ts'

/**
 * Distribution function of the negative-binomial law with real size k and success probability q:
 * I_q(k, floor(x) + 1). Mean k (1 - q)/q, variance mean/q.
 *
 * Our own incomplete beta: jStat's version fails for k < 1, and @stdlib's (which the tests compare with) is 5e-14 off
 * at exact ties of large sizes, enough to move a quantile by one.
 * Source: Abramowitz & Stegun 26.5.26. Accuracy: absolute error < 1e-13 for means up to 1e4, 1e-11 up to 1e6.
 * Fixture: `quantiles.open.json`, family negbin.
 *
 * @throws {RangeError} when size is not above 0 or probability outside (0, 1]
 * @example negativeBinomialCdf(-1, 1, 0.5) // => 0
 */
export function negativeBinomialCdf(x: number, size: number, probability: number): number {
  if (!(size > 0 && Number.isFinite(size) && probability > 0 && probability <= 1))
    throw new RangeError(`negative-binomial law is outside its domain: ${size}, ${probability}`)
  if (x < 0) return 0
  return incompleteBeta(probability, 1 - probability, size, Math.floor(x) + 1).lower
}
