import jStat from 'jstat'
import { gammaQuantile } from './gamma-quantile.ts'

/** From here on jStat takes milliseconds a call. */
const MANY = 400

/**
 * Quantile of the chi-square law with real degrees of freedom.
 *
 * Source: jStat 1.9.6 `chisquare.inv`, checked against R 4.2.2; above 400 degrees of freedom `gammaQuantile`. Accuracy: relative error < 1e-10 for
 * 0.001 <= p <= 0.9999 and 0.5 to 1e5 degrees of freedom.
 *
 * @throws {RangeError} when p is outside (0, 1) or the degrees of freedom are not above 0
 */
export function chiSquareQuantile(p: number, degreesOfFreedom: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p is outside (0, 1): ${p}`)
  if (!(degreesOfFreedom > 0)) throw new RangeError(`degrees of freedom outside their domain: ${degreesOfFreedom}`)
  if (degreesOfFreedom > MANY) return gammaQuantile(p, degreesOfFreedom / 2, 2)
  return jStat.chisquare.inv(p, degreesOfFreedom)
}
