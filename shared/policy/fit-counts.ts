import { censoredCounts } from './censored-counts.ts'
import { censoredPoissonRate } from './censored-poisson.ts'
import { chiSquareNodes, MIXTURE_NODES } from './chi-square-nodes.ts'
import { mixtureLaw, negativeBinomialLaw } from './count-laws.ts'
import { pointLaw } from './demand-law.ts'
import { demandMoments } from './demand-moments.ts'
import { figure } from './figure.ts'
import { countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

/** Keeps a node finite where a tiny prior weight puts its chi-square at 0. */
const LARGEST_DISPERSION = 1e9

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

/**
 * The recommended method: negative-binomial demand whose rate and dispersion are uncertain.
 *
 * nu = nu0 + d, wbar = (nu0 w0 + d w^)/nu, d = n - 1 (whole intervals less one after empty endings); over 200 nodes
 * w_k = max(1, nu wbar / chi2_k): m_k = P (X + 1/2)/T and VMR_k = w_k (1 + P/T) + m_k Var P/P^2, or with a rate prior
 * m_k = P (a + X/w_k)/(b + T/w_k) and VMR_k = w_k + P/(b + T/w_k) + m_k Var P/P^2. w^ = 1 for one interval or no use.
 * Source: statistics, 4.6, 4.0 and 4.12. The variance reported is the one at wbar.
 */
export function fitMixture(input: ResolvedInput, intervals: ResolvedInterval[]): Fitted {
  const { nu0, w0, rate } = input.prior
  const whole = intervals.some((interval) => !interval.censored)
  const posterior = rate && !whole ? rate : null
  const { moments, freedom } = censoredCounts(intervals, { nu0, w0 }, (seen, w) =>
    posterior
      ? (posterior.a + (seen.meanPerDay * seen.exposureDays) / w) / (posterior.b + seen.exposureDays / w)
      : seen.meanPerDay,
  )
  const days = moments.exposureDays
  const used = Math.max(0, moments.meanPerDay * days)
  const nu = nu0 + freedom
  const pooled = (nu0 * w0 + freedom * (used > 0 ? (moments.dispersion ?? 1) : 1)) / nu
  const rateAt = (w: number) => (rate ? (rate.a + used / w) / (rate.b + days / w) : (used + 0.5) / days)
  const unsureAt = (w: number) => (rate ? 1 / (rate.b + days / w) : w / days)
  const nodes = chiSquareNodes(nu)
  const wastage = countedWastage(input.wastagePerDay, used / days)
  return {
    method: 'negative-binomial-mixture',
    meanPerDay: moments.meanPerDay,
    variancePerDay: moments.variancePerDay,
    dispersion: moments.dispersion,
    answersFill: true,
    model: `negative binomial, mean over ${MIXTURE_NODES} dispersions around ${figure(pooled)} (${figure(nu)} degrees of freedom)`,
    lawOver: ({ days: calendarDays, exposure, variance }) => {
      const wasted = wastage * calendarDays
      if (exposure <= 0) return pointLaw(wasted)
      const meanAt = (w: number) => exposure * rateAt(w) + wasted
      const ratioAt = (w: number) =>
        Math.max(1 + 1e-9, w + exposure * unsureAt(w) + (exposure * rateAt(w) * variance) / (exposure * exposure))
      const means = new Float64Array(MIXTURE_NODES)
      const ratios = new Float64Array(MIXTURE_NODES)
      let mean = 0
      for (let k = 0; k < MIXTURE_NODES; k++) {
        const w = Math.min(LARGEST_DISPERSION, Math.max(1, (nu * pooled) / nodes[k]!))
        means[k] = meanAt(w)
        ratios[k] = ratioAt(w)
        mean += means[k]! / MIXTURE_NODES
      }
      return mixtureLaw(means, ratios, { mean, variance: mean * ratioAt(pooled) })
    },
  }
}
