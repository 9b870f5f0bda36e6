import type { Fitted } from './fitted.ts'
import { estimatePoisson, fitGammaPoisson, fitPoisson } from './fit-counts.ts'
import { fitDaily } from './fit-daily.ts'
import { fitMixture } from './fit-mixture.ts'
import { estimateMoments, fitMoments, fitStudent } from './fit-moments.ts'
import { refused } from './policy-input-error.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

/** Above this mean over the protection interval `auto` takes the t or normal law (statistics, section 0). */
export const LARGE_MEAN = 1000

/**
 * Fits the method that was asked for, or the one `auto` chooses, to the input.
 *
 * @returns null where the data say nothing: no interval or only intervals that ended empty, and no pool
 * @throws {PolicyInputError} when method and data do not fit together
 */
export function fitMethod(input: ResolvedInput): Fitted | null {
  const fitted = input.intervals ? fitIntervals(input, input.intervals) : fitKnown(input)
  if (fitted && input.serviceMeasure === 'fill') requireFill(input, fitted)
  return fitted
}

function fitIntervals(input: ResolvedInput, intervals: ResolvedInterval[]): Fitted | null {
  const predictive = input.estimate === 'predictive'
  switch (input.method) {
    case 'normal':
      if (predictive) return fitStudent(input, intervals)
      return fitMoments(input, 'normal', estimateMoments('normal', intervals))
    case 'gamma':
    case 'lognormal':
      return fitMoments(input, input.method, estimateMoments(input.method, intervals))
    case 'negative-binomial':
      if (!predictive) return fitMoments(input, input.method, estimateMoments(input.method, intervals))
      return mixtureTells(input, intervals) ? fitMixture(input, intervals) : null
    case 'poisson': {
      if (!tells(input, intervals)) return null
      if (predictive) return fitGammaPoisson(input, intervals)
      if (intervals.every((interval) => interval.censored)) return null
      const { meanPerDay, variancePerDay } = estimatePoisson(intervals)
      return fitPoisson(input, meanPerDay, variancePerDay)
    }
    case 'bootstrap':
    case 'empirical':
      return intervals.length > 0 ? fitDaily(input, intervals, input.method) : null
    case 'auto':
      if (!mixtureTells(input, intervals)) return null
      return wantsStudent(input, intervals) ? fitStudent(input, intervals) : fitMixture(input, intervals)
  }
}

/** Some interval must have been seen whole; where all ended empty a pool must stand in. */
function tells(input: ResolvedInput, intervals: readonly ResolvedInterval[]): boolean {
  if (intervals.length === 0) return false
  return intervals.some((interval) => !interval.censored) || input.prior.rate !== null
}

/** Before the first count the mixture can start from like wards, if these were counted. */
function mixtureTells(input: ResolvedInput, intervals: readonly ResolvedInterval[]): boolean {
  if (intervals.length === 0) return input.prior.rate !== null && input.prior.rate.b > 0
  return tells(input, intervals)
}

function wantsStudent(input: ResolvedInput, intervals: ResolvedInterval[]): boolean {
  let whole = 0
  for (const interval of intervals) if (!interval.censored) whole++
  if (whole < 2) return false
  if (intervals.some((interval) => !Number.isInteger(interval.quantity))) return true
  return input.moments!.meanPerDay * input.protectionExposureDays > LARGE_MEAN
}

function fitKnown(input: ResolvedInput): Fitted {
  const known = input.demand!
  switch (input.method) {
    case 'bootstrap':
    case 'empirical':
      throw refused('/method', `${input.method} needs intervals: daily records, not a mean and a variance`)
    case 'poisson':
      return fitPoisson(input, known.meanPerDay, known.variancePerDay)
    case 'auto':
      if (known.meanPerDay * input.protectionExposureDays > LARGE_MEAN) return fitMoments(input, 'normal', known)
      if (known.variancePerDay > known.meanPerDay) return fitMoments(input, 'negative-binomial', known)
      return fitPoisson(input, known.meanPerDay, known.variancePerDay)
    default:
      return fitMoments(input, input.method, known)
  }
}

function requireFill(input: ResolvedInput, fitted: Fitted): void {
  if (input.order.quantity === null)
    throw refused('/order/quantity', 'a fill rate depends on the order quantity: give order.quantity')
  if (!fitted.answersFill)
    throw refused('/serviceMeasure', 'a fill rate needs estimate plug-in, or the negative-binomial mixture')
}
