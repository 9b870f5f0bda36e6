import { incompleteGamma } from './incomplete-gamma.ts'

/**
 * Distribution function of the gamma law with shape and scale.
 *
 * Source: Abramowitz & Stegun 26.1.32. Accuracy: relative error < 1e-12. Fixture: `worked_examples.json` W23-W26.
 *
 * @throws {RangeError} when shape or scale is not above 0
 * @example gammaCdf(0, 2, 3) // => 0
 */
export function gammaCdf(x: number, shape: number, scale: number): number {
  if (!(scale > 0)) throw new RangeError(`scale is outside its domain: ${scale}`)
  return x <= 0 ? 0 : incompleteGamma(shape, x / scale).lower
}
