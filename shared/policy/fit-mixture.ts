import { censoredCounts } from './censored-counts.ts'
import type { CensoredCounts } from './censored-counts.ts'
import { MIXTURE_NODES } from './chi-square-nodes.ts'
import type { DemandMoments } from './demand-moments.ts'
import { pointLaw } from './demand-law.ts'
import { figure } from './figure.ts'
import { countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import { mixtureLaw } from './mixture-law.ts'
import { mixtureNodes, mixturePosterior, ratioAt } from './mixture-nodes.ts'
import type { MixturePosterior } from './mixture-nodes.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'
import { ownShare } from './pool.ts'

/**
 * The recommended method: negative-binomial demand whose rate and dispersion are uncertain.
 *
 * nu = nu0 + d, wbar = (nu0 w0 + d w^)/nu, d = n - 1 (whole intervals less one after empty endings); over 200 nodes
 * w_k = max(1, nu wbar / chi2_k): m_k = P (X + 1/2)/T and VMR_k = w_k (1 + P/T) + m_k Var P/P^2, or with a rate prior
 * m_k = P (a + X/w_k)/(b + T/w_k) and VMR_k = w_k + P/(b + T/w_k) + m_k Var P/P^2. w^ = 1 for one interval or no use.
 * Before the first count the rate prior speaks alone: T = X = d = 0, use a/b per day. It must then have days (b > 0).
 * Source: statistics, 4.6, 4.7, 4.0 and 4.12. The variance reported is the one at wbar.
 */
export function fitMixture(input: ResolvedInput, intervals: readonly ResolvedInterval[]): Fitted {
  const { rate } = input.prior
  const counts = intervals.length > 0 ? mixtureCounts(intervals, input.prior, input.moments!) : null
  const posterior = mixturePosterior(counts, input.prior)
  const meanPerDay = counts ? counts.moments.meanPerDay : rate!.a / rate!.b
  const seenPerDay = counts ? posterior.used / posterior.days : meanPerDay
  const wastage = countedWastage(input.wastagePerDay, seenPerDay)
  return {
    method: 'negative-binomial-mixture',
    meanPerDay,
    variancePerDay: counts?.moments.variancePerDay ?? null,
    dispersion: counts?.moments.dispersion ?? null,
    answersFill: true,
    model: modelOf(posterior),
    likeWards: likeWardsOf(posterior),
    lawOver: ({ days, exposure, variance }) => {
      const stretch = { exposure, variance, wasted: wastage * days }
      if (exposure <= 0) return pointLaw(stretch.wasted)
      const nodes = mixtureNodes(posterior, stretch)
      return mixtureLaw(nodes, nodes.mean * ratioAt(posterior, posterior.dispersion, stretch))
    },
  }
}

/** Counts as the mixture reads them, `plain` being their plain moments: after empty endings alone the rate prior takes part in filling them in. */
export function mixtureCounts(
  intervals: readonly ResolvedInterval[],
  { nu0, w0, rate }: ResolvedInput['prior'],
  plain: DemandMoments,
): CensoredCounts {
  const whole = intervals.some((interval) => !interval.censored)
  const posterior = rate && !whole ? rate : null
  const rateRule = (seen: DemandMoments, w: number) =>
    posterior
      ? (posterior.a + (seen.meanPerDay * seen.exposureDays) / w) / (posterior.b + seen.exposureDays / w)
      : seen.meanPerDay
  return censoredCounts(intervals, { nu0, w0 }, rateRule, plain)
}

const modelOf = ({ dispersion, freedom }: MixturePosterior): string =>
  `negative binomial, mean over ${MIXTURE_NODES} dispersions around ${figure(dispersion)} (${figure(freedom)} degrees of freedom)`

/** What like wards add to the rate, at the centre of the dispersion; null without a rate of theirs. */
function likeWardsOf(posterior: MixturePosterior): Fitted['likeWards'] {
  const { rate, days, used, dispersion } = posterior
  if (rate === null || rate.b === 0) return null
  const own = ownShare({ rate }, { exposureDays: days }, dispersion)!
  const perDay = (rate.a + used / dispersion) / (rate.b + days / dispersion)
  return { own, theirsPerDay: rate.a / rate.b, perDay }
}
