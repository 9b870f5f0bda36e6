import { normalUpperTail } from './normal-upper-tail.ts'

/**
 * Expected units short E[(D - r)+] when demand is lognormal.
 *
 * Formula: e^{m + s^2/2} Phi((m + s^2 - ln r)/s) - r Phi((m - ln r)/s).
 * Source: P. Zipkin, Foundations of Inventory Management (2000), App. C. Accuracy: relative error < 1e-10.
 * Fixture: `loss.json`, family lognormal.
 *
 * @returns units
 * @throws {RangeError} when sdLog is not above 0
 */
export function lognormalLoss(r: number, meanLog: number, sdLog: number): number {
  if (!(sdLog > 0)) throw new RangeError(`sdLog is outside its domain: ${sdLog}`)
  const mean = Math.exp(meanLog + (sdLog * sdLog) / 2)
  if (r <= 0) return mean - r
  const z = (Math.log(r) - meanLog) / sdLog
  return mean * normalUpperTail(z - sdLog) - r * normalUpperTail(z)
}
