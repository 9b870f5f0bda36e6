import type { DemandMoments } from './demand-moments.ts'
import type { PolicyWarning } from './policy-result.ts'
import type { ResolvedInterval } from './resolve-input.ts'

// Cut-offs of Syntetos, Boylan & Croston, JORS 56 (2005) 495-503.
const LUMPY_ADI = 1.32
const LUMPY_CV2 = 0.49
/** Below this many intervals neither a trend nor a correlation can be told from chance (statistics, 4.12). */
const FEWEST_FOR_PATTERN = 12
const STANDARD_ERRORS = 2

/**
 * Shapes in the history that make the estimate less sure: `lumpy`, `autocorrelated`, `trend`.
 *
 * Lumpy: average gap between intervals with use above 1.32 and squared variation of their daily use above 0.49.
 * Autocorrelated: lag-1 correlation of the residuals (x - mu t)/sqrt t above 2/sqrt n, from 12 intervals on.
 * Trend: slope of a log-linear rate above two of its standard errors, from 12 intervals on.
 * Shape: `moments` are those of the intervals. Source: statistics, 3.3, 1.1 and 4.12.
 */
export function demandPatterns(intervals: readonly ResolvedInterval[], moments: DemandMoments): PolicyWarning[] {
  const found: PolicyWarning[] = []
  if (isLumpy(intervals)) found.push('lumpy')
  if (intervals.length < FEWEST_FOR_PATTERN) return found
  if (isAutocorrelated(intervals, moments.meanPerDay)) found.push('autocorrelated')
  if (hasTrend(intervals, moments)) found.push('trend')
  return found
}

function isLumpy(intervals: readonly ResolvedInterval[]): boolean {
  let count = 0
  let sum = 0
  for (const { quantity, exposureDays } of intervals)
    if (quantity > 0) {
      count++
      sum += quantity / exposureDays
    }
  if (count < 2 || !(intervals.length / count > LUMPY_ADI)) return false
  const mean = sum / count
  let squares = 0
  for (const { quantity, exposureDays } of intervals) if (quantity > 0) squares += (quantity / exposureDays - mean) ** 2
  return squares / (count - 1) / (mean * mean) > LUMPY_CV2
}

function isAutocorrelated(intervals: readonly ResolvedInterval[], meanPerDay: number): boolean {
  let squares = 0
  let products = 0
  let before = 0
  for (const { quantity, exposureDays } of intervals) {
    const residual = (quantity - meanPerDay * exposureDays) / Math.sqrt(exposureDays)
    squares += residual * residual
    products += residual * before
    before = residual
  }
  return squares > 0 && products / squares > STANDARD_ERRORS / Math.sqrt(intervals.length)
}

const MOST_STEPS = 50

/** Quasi-Poisson regression ln mu_i = a + b time_i with offset ln t_i, by Newton steps; time as a share of the whole. */
function hasTrend(intervals: readonly ResolvedInterval[], { meanPerDay, dispersion }: DemandMoments): boolean {
  if (!(meanPerDay > 0 && dispersion !== null)) return false
  const times = middleTimes(intervals)
  let intercept = Math.log(meanPerDay)
  let slope = 0
  let information = 0
  for (let step = 0; step < MOST_STEPS; step++) {
    const { ga, gb, aa, ab, bb } = scores(intervals, times, intercept, slope)
    const determinant = aa * bb - ab * ab
    if (!(determinant > 0)) return false
    const stepSlope = (aa * gb - ab * ga) / determinant
    intercept += (bb * ga - ab * gb) / determinant
    slope += stepSlope
    information = determinant / aa
    if (!(Math.abs(slope) < 50)) return false
    if (Math.abs(stepSlope) < 1e-8) break
  }
  const error = Math.sqrt(Math.max(1, dispersion) / information)
  return Math.abs(slope) / error > STANDARD_ERRORS
}

/** Middles of the intervals, from -1/2 to 1/2. */
function middleTimes(intervals: readonly ResolvedInterval[]): Float64Array {
  const times = new Float64Array(intervals.length)
  let clock = 0
  for (let i = 0; i < times.length; i++) {
    clock += intervals[i]!.days
    times[i] = clock - intervals[i]!.days / 2
  }
  for (let i = 0; i < times.length; i++) times[i] = times[i]! / clock - 0.5
  return times
}

/** Gradient and information of the log-likelihood in intercept (a) and slope (b). */
function scores(intervals: readonly ResolvedInterval[], times: Float64Array, intercept: number, slope: number) {
  let ga = 0
  let gb = 0
  let aa = 0
  let ab = 0
  let bb = 0
  for (let i = 0; i < times.length; i++) {
    const { exposureDays, quantity, weight } = intervals[i]!
    const time = times[i]!
    const fitted = weight * exposureDays * Math.exp(intercept + slope * time)
    const residual = weight * quantity - fitted
    ga += residual
    gb += residual * time
    aa += fitted
    ab += fitted * time
    bb += fitted * time * time
  }
  return { ga, gb, aa, ab, bb }
}
