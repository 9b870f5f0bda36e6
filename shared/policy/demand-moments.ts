import type { ResolvedInterval } from './resolve-input.ts'

/** Mean, variance and effective sizes of a demand history. Units: units of use per day of exposure. */
export interface DemandMoments {
  meanPerDay: number
  /** Unbiased variance per day; null with fewer than two intervals */
  variancePerDay: number | null
  /** Variance-to-mean ratio; null where the variance is, or with no use */
  dispersion: number | null
  /** Effective number of intervals; the plain number when weights are equal */
  intervals: number
  /** Effective exposure in days; the plain sum when weights are equal */
  exposureDays: number
}

/** An expected quantity and its expected square, standing in for an interval that ended empty. */
export interface ExpectedUse {
  quantity: number
  square: number
}

/**
 * Weighted moments of interval demand x_i ~ (mu t_i, sigma^2 t_i), intervals independent.
 *
 * mu = sum w x / sum w t; s^2 = sum w (x - mu t)^2/t / (sum w - sum w^2 t / sum w t); effective days
 * (sum w t)^2 / sum w^2 t, effective number (sum w)^2 / sum w^2. With equal weights these are X/T and the unbiased
 * variance with divisor n - 1. `expected` replaces x_i and x_i^2 where the true figure is unknown.
 * Source: statistics, 4.2 and 4.12. Negative quantities are kept.
 *
 * @throws {RangeError} without intervals
 */
export function demandMoments(intervals: ResolvedInterval[], expected?: ExpectedUse[]): DemandMoments {
  if (intervals.length === 0) throw new RangeError('demandMoments needs at least one interval')
  let weights = 0
  let squaredWeights = 0
  let exposure = 0
  let weightedExposure = 0
  let quantity = 0
  intervals.forEach((interval, i) => {
    const { weight, exposureDays } = interval
    weights += weight
    squaredWeights += weight * weight
    exposure += weight * exposureDays
    weightedExposure += weight * weight * exposureDays
    quantity += weight * (expected?.[i]?.quantity ?? interval.quantity)
  })
  const meanPerDay = quantity / exposure
  const divisor = weights - weightedExposure / exposure
  let squares = 0
  intervals.forEach((interval, i) => {
    const fitted = meanPerDay * interval.exposureDays
    const guess = expected?.[i]
    const square = guess
      ? guess.square - 2 * fitted * guess.quantity + fitted * fitted
      : (interval.quantity - fitted) ** 2
    squares += (interval.weight * square) / interval.exposureDays
  })
  const variancePerDay = intervals.length > 1 ? squares / divisor : null
  return {
    meanPerDay,
    variancePerDay,
    dispersion: variancePerDay !== null && meanPerDay > 0 ? variancePerDay / meanPerDay : null,
    intervals: (weights * weights) / squaredWeights,
    exposureDays: (exposure * exposure) / weightedExposure,
  }
}
