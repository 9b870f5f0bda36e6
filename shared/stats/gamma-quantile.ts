import jStat from 'jstat'
import { incompleteGamma } from './incomplete-gamma.ts'
import { normalQuantile } from './normal-quantile.ts'
import { poissonMass } from './poisson-mass.ts'

/** From this shape on jStat's search takes milliseconds, and the cube-root start is good to three digits. */
const LARGE_SHAPE = 200

/**
 * Quantile of the gamma law with shape and scale.
 *
 * jStat (relative error up to 7e-11) or, for large shapes, the Wilson-Hilferty cube root gives the start; Newton
 * steps on the nearer tail of our own distribution function bring it to full precision.
 * Source: Abramowitz & Stegun 26.4.17 and 26.1.32; jStat 1.9.6 `gamma.inv`. Accuracy: relative error < 1e-11, except
 * where the true quantile lies below 1e-300 and 0 is answered. Fixture: `quantiles.open.json`, family gamma.
 *
 * @throws {RangeError} when p is outside (0, 1), or shape or scale is not above 0
 */
export function gammaQuantile(p: number, shape: number, scale: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p is outside (0, 1): ${p}`)
  if (!(shape > 0 && scale > 0)) throw new RangeError(`gamma law is outside its domain: ${shape}, ${scale}`)
  let x = shape < LARGE_SHAPE ? jStat.gamma.inv(p, shape, 1) : cubeRootStart(p, shape)
  if (!(x > 1e-300)) return 0
  for (let step = 0; step < 20; step++) {
    const tails = incompleteGamma(shape, x)
    const density = (poissonMass(shape, x) * shape) / x
    const error = p < 0.5 ? tails.lower - p : 1 - p - tails.upper
    const next = x - error / density
    if (!(next > 0 && Number.isFinite(next))) break
    const change = Math.abs(next - x)
    x = next
    if (change <= 1e-14 * x) break
  }
  return x * scale
}

function cubeRootStart(p: number, shape: number): number {
  const ninth = 1 / (9 * shape)
  return shape * (1 - ninth + normalQuantile(p) * Math.sqrt(ninth)) ** 3
}
