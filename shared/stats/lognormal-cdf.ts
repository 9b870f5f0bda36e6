import { normalCdf } from './normal-cdf.ts'

/**
 * Distribution function of the lognormal law.
 *
 * Source: Johnson, Kotz & Balakrishnan, Continuous Univariate Distributions 1 (1994), ch. 14. Accuracy: as normalCdf.
 *
 * @throws {RangeError} when sdLog is not above 0
 * @example lognormalCdf(1, 0, 1) // => 0.5
 */
export function lognormalCdf(x: number, meanLog: number, sdLog: number): number {
  if (!(sdLog > 0)) throw new RangeError(`sdLog is outside its domain: ${sdLog}`)
  return x <= 0 ? 0 : normalCdf((Math.log(x) - meanLog) / sdLog)
}
