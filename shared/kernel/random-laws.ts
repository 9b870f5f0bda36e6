import type { Random } from './random.ts'

/** A uniform draw that is never 0, so that its logarithm exists. */
const positive = (random: Random): number => 1 - random()

/**
 * A draw from the exponential law by inversion. Shape: `mean` in any unit, above 0; the draw is in the same unit.
 * @example drawExponential(() => 0, 4) // => 0
 */
export function drawExponential(random: Random, mean: number): number {
  if (!(mean > 0)) throw new RangeError(`mean must be above 0, not ${mean}`)
  const draw = -mean * Math.log(positive(random))
  return draw === 0 ? 0 : draw
}

/** A draw from the standard normal law. Source: Box & Muller (1958), one of the pair. */
export function drawNormal(random: Random): number {
  return Math.sqrt(-2 * Math.log(positive(random))) * Math.cos(2 * Math.PI * random())
}

/**
 * A draw from the gamma law with that shape and scale (mean = shape × scale).
 * Source: Marsaglia & Tsang, "A simple method for generating gamma variables" (2000); below shape 1 by their boost.
 * @throws {RangeError} when shape or scale is not above 0
 */
export function drawGamma(random: Random, shape: number, scale: number): number {
  if (!(shape > 0) || !(scale > 0)) throw new RangeError(`shape and scale must be above 0, not ${shape}, ${scale}`)
  if (shape < 1) return drawGamma(random, shape + 1, scale) * positive(random) ** (1 / shape)
  const d = shape - 1 / 3
  const c = 1 / Math.sqrt(9 * d)
  for (;;) {
    const x = drawNormal(random)
    const v = (1 + c * x) ** 3
    if (v > 0 && Math.log(positive(random)) < 0.5 * x * x + d - d * v + d * Math.log(v)) return d * v * scale
  }
}

/** Above this mean the law is split by a gamma draw first, so that exp(−mean) stays far from 0. */
const largeMean = 30

/**
 * A draw from the Poisson law. Whole units.
 * Source: Knuth, TAOCP 2, 3.4.1 (product of uniforms); large means by Ahrens & Dieter's gamma reduction (1974).
 * @throws {RangeError} when the mean is negative
 * @example drawPoisson(() => 0.5, 0) // => 0
 */
export function drawPoisson(random: Random, mean: number): number {
  if (!(mean >= 0)) throw new RangeError(`mean must not be negative, not ${mean}`)
  if (mean <= largeMean) return countUniforms(random, mean)
  // The time of the m-th event; what remains is Poisson or binomial around it.
  const m = Math.floor(mean * 0.875)
  const time = drawGamma(random, m, 1)
  if (time <= mean) return m + drawPoisson(random, mean - time)
  let events = 0
  for (let i = 1; i < m; i += 1) if (random() < mean / time) events += 1
  return events
}

function countUniforms(random: Random, mean: number): number {
  const limit = Math.exp(-mean)
  let events = 0
  for (let product = positive(random); product > limit; product *= positive(random)) events += 1
  return events
}

/**
 * A draw of over-dispersed demand: the negative binomial law with that mean and variance-to-mean ratio, the same as
 * a Poisson number of batches whose sizes are logarithmic. Draws of neighbouring spans with one ratio add up to the
 * law of the whole span. Drawn as Poisson with a gamma mean.
 * Source: Johnson, Kemp & Kotz, *Univariate Discrete Distributions* (2005), 5.3 and 9.2.
 * @param ratio variance ÷ mean; at 1 or below the law is Poisson
 */
export function drawNegativeBinomial(random: Random, mean: number, ratio: number): number {
  if (mean <= 0 || ratio <= 1) return drawPoisson(random, Math.max(0, mean))
  return drawPoisson(random, drawGamma(random, mean / (ratio - 1), ratio - 1))
}
