import { integerQuantile, TIE_GUARD } from '#shared/stats/integer-quantile.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { MIXTURE_NODES } from './chi-square-nodes.ts'
import type { MixtureNodes } from './mixture-nodes.ts'

/** Masses are carried this many times too large where a mass at 0 would underflow. */
const LIFT = 600
/** Beyond this even lifted masses underflow, and the recurrence cannot start. */
const LARGEST_EXPONENT = 700
/** Values run through one after the other; further out each is computed on its own. */
export const LONGEST_RUN = 20_000

/**
 * The masses of all parts of a mixture at one value y, ready to go on to y + 1.
 *
 * f(y + 1) = f(y) (k + y)/(y + 1) (1 - q) for size k and probability q of each part: one pass over the parts gives the
 * next value of the mixture's distribution function, which is what makes a reorder point cheap.
 */
export interface MixtureRun {
  count: number
  masses: Float64Array
  sizes: Float64Array
  failures: Float64Array
  /** F(y) */
  reached: number
  y: number
  /** What a sum of masses is multiplied with */
  scale: number
  /** False where a mass at 0 underflows whatever is done; the run is then of no use. */
  fits: boolean
}

export const emptyRun = (): MixtureRun => ({
  count: 0,
  masses: new Float64Array(MIXTURE_NODES),
  sizes: new Float64Array(MIXTURE_NODES),
  failures: new Float64Array(MIXTURE_NODES),
  reached: 0,
  y: 0,
  scale: 1,
  fits: false,
})

/** Sets a run to y = 0. Source: statistics, 4.6. Accuracy: absolute error of F < 1e-11. */
export function startRun(nodes: MixtureNodes, run: MixtureRun = emptyRun()): MixtureRun {
  let largest = 0
  run.count = nodes.count
  for (let k = 0; k < nodes.count; k++) {
    const ratio = nodes.ratios[k]!
    const size = nodes.means[k]! / (ratio - 1)
    const exponent = size * Math.log(ratio)
    run.sizes[k] = size
    run.failures[k] = 1 - 1 / ratio
    run.masses[k] = exponent
    if (exponent > largest) largest = exponent
  }
  const lift = largest < LARGEST_EXPONENT ? 0 : LIFT
  run.fits = largest < LARGEST_EXPONENT + lift
  run.scale = Math.exp(-lift) / MIXTURE_NODES
  let sum = 0
  for (let k = 0; k < nodes.count; k++) {
    const mass = nodes.shares[k]! * Math.exp(lift - run.masses[k]!)
    run.masses[k] = mass
    sum += mass
  }
  run.y = 0
  run.reached = sum * run.scale
  return run
}

/** Goes on to the next value and answers F there. */
export function advance(run: MixtureRun): number {
  const { count, masses, sizes, failures, y } = run
  const step = 1 / (y + 1)
  let even = 0
  let odd = 0
  // Two sums, so that an addition need not wait for the one before.
  let k = 0
  for (; k + 1 < count; k += 2) {
    const first = masses[k]! * (sizes[k]! + y) * failures[k]! * step
    const second = masses[k + 1]! * (sizes[k + 1]! + y) * failures[k + 1]! * step
    masses[k] = first
    masses[k + 1] = second
    even += first
    odd += second
  }
  if (k < count) {
    const last = masses[k]! * (sizes[k]! + y) * failures[k]! * step
    masses[k] = last
    even += last
  }
  run.y = y + 1
  run.reached = Math.min(1, run.reached + (even + odd) * run.scale)
  return run.reached
}

/** F(r) of a mixture computed on its own, by the incomplete beta function of each part. */
export function mixtureCdf(nodes: MixtureNodes, r: number): number {
  let total = 0
  for (let k = 0; k < nodes.count; k++) {
    const ratio = nodes.ratios[k]!
    total += nodes.shares[k]! * negativeBinomialCdf(r, nodes.means[k]! / (ratio - 1), 1 / ratio)
  }
  return total / MIXTURE_NODES
}

/**
 * Smallest r with F(r) >= p where a run cannot be used or has become too long.
 *
 * @throws {RangeError} when the level would pass 2^53
 */
export function distantLevel(nodes: MixtureNodes, p: number, variance: number): number {
  const guess = nodes.mean + normalQuantile(p) * Math.sqrt(Math.max(0, variance))
  return integerQuantile((r) => mixtureCdf(nodes, r), p, guess)
}

/**
 * Smallest whole r >= 0 with F(r) >= p of a mixture, with the tie rule of `integerQuantile`.
 *
 * @param variance of the mixture, for a first guess far out
 * @throws {RangeError} when the level would pass 2^53
 */
export function mixtureLevel(nodes: MixtureNodes, p: number, variance: number, scratch?: MixtureRun): number {
  const run = startRun(nodes, scratch)
  if (!run.fits) return distantLevel(nodes, p, variance)
  const aim = p * TIE_GUARD
  for (let reached = run.reached; reached < aim; reached = advance(run))
    if (run.y >= LONGEST_RUN) return distantLevel(nodes, p, variance)
  return run.y
}
