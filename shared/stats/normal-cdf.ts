import { normalUpperTail } from './normal-upper-tail.ts'

/**
 * Distribution function of the standard normal law.
 *
 * Source: Abramowitz & Stegun 26.2.2. Accuracy: absolute error < 1e-15; the lower tail keeps its relative precision.
 * Fixture: `worked_examples.json` W05.
 *
 * @throws {RangeError} when z is not a number
 * @example normalCdf(0) // => 0.5
 */
export function normalCdf(z: number): number {
  return normalUpperTail(-z)
}
