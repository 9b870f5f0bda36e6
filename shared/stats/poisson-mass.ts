import { deviance } from './deviance.ts'
import { stirlingError } from './stirling-error.ts'

/**
 * Poisson mass e^-m m^x / x!, also for real x >= 0 (then x! = Gamma(x + 1)).
 *
 * Saddle-point form, so that it neither overflows nor loses digits for large means.
 * Source: C. Loader, "Fast and Accurate Computation of Binomial Probabilities" (2000), eq. 3.
 * Accuracy: relative error < 1e-13.
 *
 * @throws {RangeError} when x or mean is negative or not finite
 */
export function poissonMass(x: number, mean: number): number {
  if (!(x >= 0 && mean >= 0 && Number.isFinite(x) && Number.isFinite(mean)))
    throw new RangeError(`poissonMass is outside its domain: ${x}, ${mean}`)
  if (mean === 0) return x === 0 ? 1 : 0
  if (x === 0) return Math.exp(-mean)
  return Math.exp(-stirlingError(x) - deviance(x, mean)) / Math.sqrt(2 * Math.PI * x)
}
