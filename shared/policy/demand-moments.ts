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

/** What moments are made from, of one interval. */
interface Counted {
  exposureDays: number
  quantity: number
  weight: number
}

/** An expected quantity and its expected square, standing in for an interval that ended empty. */
export interface ExpectedUse {
  quantity: number
  square: number
}

/** Intervals as columns of one length. `square`: expected squares, where some quantities are expectations. */
export interface DemandColumns {
  exposureDays: Float64Array
  quantity: Float64Array
  weight: Float64Array
  square?: Float64Array
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
export function demandMoments(intervals: readonly Counted[], expected?: ExpectedUse[]): DemandMoments {
  const count = intervals.length
  const columns: DemandColumns = {
    exposureDays: new Float64Array(count),
    quantity: new Float64Array(count),
    weight: new Float64Array(count),
  }
  if (expected) columns.square = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    const { exposureDays, quantity, weight } = intervals[i]!
    columns.exposureDays[i] = exposureDays
    columns.quantity[i] = expected?.[i]?.quantity ?? quantity
    columns.weight[i] = weight
    if (columns.square) columns.square[i] = expected![i]!.square
  }
  return columnMoments(columns, 0, count)
}

/**
 * `demandMoments` of the rows `from` to before `to` of columns.
 *
 * @throws {RangeError} without rows
 */
export function columnMoments(columns: DemandColumns, from: number, to: number): DemandMoments {
  if (to <= from) throw new RangeError('demandMoments needs at least one interval')
  let weights = 0
  let squaredWeights = 0
  let exposure = 0
  let weightedExposure = 0
  let quantity = 0
  for (let i = from; i < to; i++) {
    const weight = columns.weight[i]!
    const days = columns.exposureDays[i]!
    weights += weight
    squaredWeights += weight * weight
    exposure += weight * days
    weightedExposure += weight * weight * days
    quantity += weight * columns.quantity[i]!
  }
  const meanPerDay = quantity / exposure
  const variancePerDay =
    to - from > 1 ? squaresAround(meanPerDay, columns, from, to) / (weights - weightedExposure / exposure) : null
  return {
    meanPerDay,
    variancePerDay,
    dispersion: variancePerDay !== null && meanPerDay > 0 ? variancePerDay / meanPerDay : null,
    intervals: (weights * weights) / squaredWeights,
    exposureDays: (exposure * exposure) / weightedExposure,
  }
}

/** sum w (x - mu t)^2/t, with E[x^2] in place of x^2 where there are expectations. */
function squaresAround(meanPerDay: number, columns: DemandColumns, from: number, to: number): number {
  let squares = 0
  for (let i = from; i < to; i++) {
    const days = columns.exposureDays[i]!
    const fitted = meanPerDay * days
    const seen = columns.quantity[i]!
    const square = columns.square
      ? columns.square[i]! - 2 * fitted * seen + fitted * fitted
      : (seen - fitted) * (seen - fitted)
    squares += (columns.weight[i]! * square) / days
  }
  return squares
}
