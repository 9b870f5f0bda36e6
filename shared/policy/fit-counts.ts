import { censoredPoissonRate } from './censored-poisson.ts'
import { negativeBinomialLaw } from './count-laws.ts'
import { pointLaw } from './demand-law.ts'
import { demandMoments } from './demand-moments.ts'
import { figure } from './figure.ts'
import { countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

/** Jeffreys' prior of a Poisson rate (statistics, 4.4). */
const JEFFREYS = { a: 0.5, b: 0 }

const hasCensored = (intervals: ResolvedInterval[]) => intervals.some((interval) => interval.censored)

/** Poisson demand at an estimated or known rate; the negative binomial when the lead time varies (statistics, 2.2). */
export function fitPoisson(input: ResolvedInput, meanPerDay: number, variancePerDay: number | null): Fitted {
  const wastage = countedWastage(input.wastagePerDay, meanPerDay)
  const varies = input.leadTime.sdDays > 0 && input.leadTime.observedDays.length === 0
  return {
    method: varies ? 'negative-binomial' : 'poisson',
    meanPerDay,
    variancePerDay,
    dispersion: variancePerDay !== null && meanPerDay > 0 ? variancePerDay / meanPerDay : null,
    answersFill: true,
    model: `Poisson demand with mean ${figure(meanPerDay)} per day`,
    lawOver: ({ days, exposure, variance }) => {
      const mean = Math.max(0, meanPerDay) * exposure
      const total = mean + wastage * days
      if (mean <= 0) return negativeBinomialLaw(total, total)
      return negativeBinomialLaw(total, total * (1 + (meanPerDay * meanPerDay * variance) / mean))
    },
  }
}

/** Poisson rate and the plain variance beside it, from intervals. */
export function estimatePoisson(intervals: ResolvedInterval[]): { meanPerDay: number; variancePerDay: number | null } {
  const moments = demandMoments(intervals)
  const meanPerDay = hasCensored(intervals) ? censoredPoissonRate(intervals) : moments.meanPerDay
  return { meanPerDay, variancePerDay: moments.variancePerDay }
}

/**
 * Poisson demand whose rate has a gamma posterior: D ~ NB(a + X, (b + T)/(b + T + P)); with a varying lead time the
 * negative binomial of variance m + a P^2/b^2 + a (a + 1)/b^2 Var P. Source: statistics, 4.4.
 */
export function fitGammaPoisson(input: ResolvedInput, intervals: ResolvedInterval[]): Fitted {
  const prior = input.prior.rate ?? JEFFREYS
  const moments = demandMoments(intervals)
  const onlyEmpty = intervals.every((interval) => interval.censored)
  let use = Math.max(0, moments.meanPerDay)
  if (onlyEmpty) {
    const posterior = censoredPoissonRate(intervals, prior)
    use = (posterior * (prior.b + moments.exposureDays) - prior.a) / moments.exposureDays
  } else if (hasCensored(intervals)) use = censoredPoissonRate(intervals)
  const a = prior.a + use * moments.exposureDays
  const b = prior.b + moments.exposureDays
  const wastage = countedWastage(input.wastagePerDay, use)
  return {
    method: 'gamma-poisson',
    meanPerDay: use,
    variancePerDay: moments.variancePerDay,
    dispersion: use > 0 && moments.variancePerDay !== null ? moments.variancePerDay / use : null,
    answersFill: false,
    model: `Poisson demand, rate known as (${figure(a)} units)/(${figure(b)} days)`,
    lawOver: ({ days, exposure, variance }) => {
      const mean = (a * exposure) / b
      if (mean <= 0) return pointLaw(wastage * days)
      const spread = mean + (a * exposure * exposure) / (b * b) + ((a * (a + 1)) / (b * b)) * variance
      const total = mean + wastage * days
      return negativeBinomialLaw(total, (spread * total) / mean)
    },
  }
}
