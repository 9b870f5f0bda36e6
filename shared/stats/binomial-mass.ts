import { deviance } from './deviance.ts'
import { stirlingError } from './stirling-error.ts'

/**
 * Binomial mass Gamma(n+1) / (Gamma(x+1) Gamma(n-x+1)) p^x q^(n-x), also for real 0 <= x <= n.
 *
 * `q` is 1 - p, passed apart so that a tiny one keeps its digits.
 * Source: C. Loader, "Fast and Accurate Computation of Binomial Probabilities" (2000), eq. 3.
 * Accuracy: relative error < 1e-13.
 *
 * @throws {RangeError} when x is outside [0, n] or p outside [0, 1]
 */
export function binomialMass(x: number, n: number, p: number, q: number): number {
  if (!(x >= 0 && x <= n && p >= 0 && q >= 0 && p <= 1 && q <= 1))
    throw new RangeError(`binomialMass is outside its domain: ${x}, ${n}, ${p}`)
  if (p === 0) return x === 0 ? 1 : 0
  if (q === 0) return x === n ? 1 : 0
  if (x === 0) return Math.exp(n * (p < 0.5 ? Math.log1p(-p) : Math.log(q)))
  if (x === n) return Math.exp(n * (q < 0.5 ? Math.log1p(-q) : Math.log(p)))
  const y = n - x
  const exponent = stirlingError(n) - stirlingError(x) - stirlingError(y) - deviance(x, n * p) - deviance(y, n * q)
  return Math.exp(exponent) * Math.sqrt(n / (2 * Math.PI * x * y))
}
