import { censoredCounts } from './censored-counts.ts'
import { censoredNormalMoments } from './censored-normal.ts'
import { gammaLaw, lognormalLaw, normalLaw, studentLaw } from './continuous-laws.ts'
import { negativeBinomialLaw } from './count-laws.ts'
import type { DemandLaw } from './demand-law.ts'
import { demandMoments } from './demand-moments.ts'
import { figure } from './figure.ts'
import { combinedMoments, countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import { refused } from './policy-input-error.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

export type MomentFamily = 'normal' | 'negative-binomial' | 'gamma' | 'lognormal'

interface Estimate {
  meanPerDay: number
  variancePerDay: number
}

/** Demand by two moments, taken as known: statistics, 2.2; censored histories by 4.11. */
export function fitMoments(input: ResolvedInput, family: MomentFamily, estimate: Estimate): Fitted {
  const { meanPerDay, variancePerDay } = estimate
  const wastage = countedWastage(input.wastagePerDay, meanPerDay)
  return {
    method: family,
    meanPerDay,
    variancePerDay,
    dispersion: meanPerDay > 0 ? variancePerDay / meanPerDay : null,
    answersFill: true,
    model: `${familyName[family]} with mean ${figure(meanPerDay)} and variance ${figure(variancePerDay)} per day`,
    lawOver: (horizon) => {
      const { mean, variance } = combinedMoments(meanPerDay, variancePerDay, horizon)
      const wasted = wastage * horizon.days
      return familyLaw[family](mean, variance, wasted)
    },
  }
}

const familyName: Record<MomentFamily, string> = {
  normal: 'normal law',
  'negative-binomial': 'negative binomial',
  gamma: 'gamma law',
  lognormal: 'lognormal law',
}

const positive = (law: (mean: number, variance: number) => DemandLaw, name: string) => {
  return (mean: number, variance: number, wasted: number): DemandLaw => {
    if (mean + wasted <= 0 && variance > 0) throw refused('/method', `${name} needs a mean use above 0`)
    return law(mean + wasted, variance)
  }
}

/** Wastage raises the mean; whole-number laws keep their variance-to-mean ratio, the others their variance. */
const familyLaw: Record<MomentFamily, (mean: number, variance: number, wasted: number) => DemandLaw> = {
  normal: (mean, variance, wasted) => normalLaw(mean + wasted, variance),
  'negative-binomial': (mean, variance, wasted) =>
    mean > 0
      ? negativeBinomialLaw(mean + wasted, (variance * (mean + wasted)) / mean)
      : negativeBinomialLaw(wasted, wasted),
  gamma: positive(gammaLaw, 'gamma'),
  lognormal: positive(lognormalLaw, 'lognormal'),
}

/**
 * Estimates mean and variance per day for a family by its way of reading intervals that ended empty.
 *
 * @throws {PolicyInputError} at `/intervals` when the data cannot give a variance
 */
export function estimateMoments(family: MomentFamily, intervals: ResolvedInterval[]): Estimate {
  requireTwo(intervals, family)
  if (!intervals.some((interval) => interval.censored)) return plainEstimate(intervals)
  if (family === 'negative-binomial') {
    const { moments } = censoredCounts(intervals, { nu0: 0, w0: 1 })
    return { meanPerDay: moments.meanPerDay, variancePerDay: moments.variancePerDay ?? 0 }
  }
  requireTwoWhole(intervals, family)
  return censoredNormalMoments(intervals)
}

function plainEstimate(intervals: ResolvedInterval[]): Estimate {
  const { meanPerDay, variancePerDay } = demandMoments(intervals)
  return { meanPerDay, variancePerDay: variancePerDay ?? 0 }
}

function requireTwo(intervals: ResolvedInterval[], name: string): void {
  if (intervals.length < 2)
    throw refused('/intervals', `${name} needs at least two intervals; there is no variance in fewer`)
}

function requireTwoWhole(intervals: ResolvedInterval[], name: string): void {
  if (intervals.filter((interval) => !interval.censored).length < 2)
    throw refused('/intervals', `${name} needs at least two intervals that did not end empty`)
}

/**
 * Normal demand with estimated parameters: predictive t. With a varying lead time V = A + mu^2 Var P,
 * A = s^2 (P + P^2/T), degrees of freedom V^2 / (A^2/(n - 1)). Source: statistics, 4.5 and 4.12.
 *
 * After intervals that ended empty the Tobit variance is scaled by u/(u - 1), u whole intervals, and n becomes u.
 *
 * @throws {PolicyInputError} at `/intervals` when the data cannot give a variance
 */
export function fitStudent(input: ResolvedInput, intervals: ResolvedInterval[]): Fitted {
  requireTwo(intervals, 'normal')
  const whole = intervals.filter((interval) => !interval.censored)
  const moments = demandMoments(intervals)
  let meanPerDay = moments.meanPerDay
  let variancePerDay = moments.variancePerDay ?? 0
  let freedom = moments.intervals - 1
  if (whole.length < intervals.length) {
    requireTwoWhole(intervals, 'normal')
    const count = demandMoments(whole).intervals
    const fitted = censoredNormalMoments(intervals)
    meanPerDay = fitted.meanPerDay
    variancePerDay = (fitted.variancePerDay * count) / (count - 1)
    freedom = count - 1
  }
  const wastage = countedWastage(input.wastagePerDay, meanPerDay)
  return {
    method: 'student',
    meanPerDay,
    variancePerDay,
    dispersion: meanPerDay > 0 ? variancePerDay / meanPerDay : null,
    answersFill: false,
    model: `t law, ${figure(freedom)} degrees of freedom before the lead time`,
    lawOver: ({ days, exposure, variance }) => {
      const mean = meanPerDay * exposure + wastage * days
      const demand = variancePerDay * (exposure + (exposure * exposure) / moments.exposureDays)
      const total = demand + meanPerDay * meanPerDay * variance
      if (demand <= 0) return normalLaw(mean, total)
      return studentLaw(mean, total, ((total * total) / (demand * demand)) * freedom)
    },
  }
}
