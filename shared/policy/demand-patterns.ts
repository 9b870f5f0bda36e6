import { demandMoments } from './demand-moments.ts'
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
 * Source: statistics, 3.3, 1.1 and 4.12.
 */
export function demandPatterns(intervals: ResolvedInterval[]): PolicyWarning[] {
  const found: PolicyWarning[] = []
  if (isLumpy(intervals)) found.push('lumpy')
  if (isAutocorrelated(intervals)) found.push('autocorrelated')
  if (hasTrend(intervals)) found.push('trend')
  return found
}

function isLumpy(intervals: ResolvedInterval[]): boolean {
  const rates = intervals.filter(({ quantity }) => quantity > 0).map((i) => i.quantity / i.exposureDays)
  if (rates.length < 2) return false
  const mean = rates.reduce((sum, rate) => sum + rate, 0) / rates.length
  const variance = rates.reduce((sum, rate) => sum + (rate - mean) ** 2, 0) / (rates.length - 1)
  return intervals.length / rates.length > LUMPY_ADI && variance / (mean * mean) > LUMPY_CV2
}

function isAutocorrelated(intervals: ResolvedInterval[]): boolean {
  if (intervals.length < FEWEST_FOR_PATTERN) return false
  const { meanPerDay } = demandMoments(intervals)
  const residuals = intervals.map((i) => (i.quantity - meanPerDay * i.exposureDays) / Math.sqrt(i.exposureDays))
  const squares = residuals.reduce((sum, e) => sum + e * e, 0)
  const products = residuals.slice(1).reduce((sum, e, i) => sum + e * residuals[i]!, 0)
  return squares > 0 && products / squares > STANDARD_ERRORS / Math.sqrt(intervals.length)
}

/** Quasi-Poisson regression ln mu_i = a + b time_i with offset ln t_i, by Newton steps; time in mean intervals. */
function hasTrend(intervals: ResolvedInterval[]): boolean {
  if (intervals.length < FEWEST_FOR_PATTERN) return false
  const { meanPerDay, dispersion } = demandMoments(intervals)
  if (!(meanPerDay > 0 && dispersion !== null)) return false
  let clock = 0
  const times = intervals.map(({ days }) => (clock += days) - days / 2)
  const middle = clock / 2
  let intercept = Math.log(meanPerDay)
  let slope = 0
  let information = 0
  for (let round = 0; round < 50; round++) {
    let [ga, gb, aa, ab, bb] = [0, 0, 0, 0, 0]
    intervals.forEach(({ exposureDays, quantity, weight }, i) => {
      const time = (times[i]! - middle) / clock
      const fitted = exposureDays * Math.exp(intercept + slope * time)
      ga += weight * (quantity - fitted)
      gb += weight * (quantity - fitted) * time
      aa += weight * fitted
      ab += weight * fitted * time
      bb += weight * fitted * time * time
    })
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
