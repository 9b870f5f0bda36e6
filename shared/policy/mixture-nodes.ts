import { chiSquareNodes, MIXTURE_NODES } from './chi-square-nodes.ts'
import type { CensoredCounts } from './censored-counts.ts'

/** Keeps a node finite where a tiny prior weight puts its chi-square at 0. */
const LARGEST_DISPERSION = 1e9

/** What counts and prior say together about rate and dispersion. */
export interface MixturePosterior {
  /** Units used, at least 0, and effective days of exposure; both 0 before the first count */
  used: number
  days: number
  /** Degrees of freedom of the dispersion: those of the prior and those of the counts */
  freedom: number
  /** Centre of the dispersion: the prior's and the counts' own, weighted by their degrees of freedom */
  dispersion: number
  rate: { a: number; b: number } | null
}

/** A stretch to cover: days of exposure, their variance (days squared), and units of wastage within. */
export interface MixtureStretch {
  exposure: number
  variance: number
  wasted: number
}

/**
 * The negative-binomial parts of a mixture: means, variance-to-mean ratios (above 1), and how many of the 200 nodes
 * each stands for. Only the first `count` entries are in use.
 */
export interface MixtureNodes {
  count: number
  means: Float64Array
  ratios: Float64Array
  shares: Float64Array
  mean: number
}

export const emptyNodes = (): MixtureNodes => ({
  count: 0,
  means: new Float64Array(MIXTURE_NODES),
  ratios: new Float64Array(MIXTURE_NODES),
  shares: new Float64Array(MIXTURE_NODES),
  mean: 0,
})

/** One law with nothing left open: a negative binomial by mean and variance-to-mean ratio (above 1). */
export const singleNode = (mean: number, ratio: number): MixtureNodes => ({
  count: 1,
  means: Float64Array.of(mean),
  ratios: Float64Array.of(ratio),
  shares: Float64Array.of(MIXTURE_NODES),
  mean,
})

/**
 * nu = nu0 + d, centre (nu0 w0 + d w^)/nu; w^ = 1 for one interval or no use. Before the first count X = T = d = 0.
 * Source: statistics, 4.6 and 4.0.
 */
export function mixturePosterior(
  counts: CensoredCounts | null,
  prior: { nu0: number; w0: number; rate: { a: number; b: number } | null },
): MixturePosterior {
  const { nu0, w0, rate } = prior
  if (counts === null) return { used: 0, days: 0, freedom: nu0, dispersion: w0, rate }
  const days = counts.moments.exposureDays
  const used = Math.max(0, counts.moments.meanPerDay * days)
  const freedom = nu0 + counts.freedom
  const seen = used > 0 ? (counts.moments.dispersion ?? 1) : 1
  return { used, days, freedom, dispersion: (nu0 * w0 + counts.freedom * seen) / freedom, rate }
}

/** Estimated units per day where the dispersion is w: (a + X/w)/(b + T/w), without a rate prior (X + 1/2)/T. */
export function rateAt({ used, days, rate }: MixturePosterior, w: number): number {
  return rate ? (rate.a + used / w) / (rate.b + days / w) : (used + 0.5) / days
}

/**
 * Variance-to-mean ratio over a stretch where the dispersion is w: w (1 + P/T), with a rate prior w + P/(b + T/w),
 * plus m Var P/P^2.
 */
export function ratioAt(posterior: MixturePosterior, w: number, stretch: MixtureStretch): number {
  const { days, rate } = posterior
  const unsure = rate ? 1 / (rate.b + days / w) : w / days
  const { exposure, variance } = stretch
  const spread = variance === 0 ? 0 : (rateAt(posterior, w) * variance) / exposure
  return Math.max(1 + 1e-9, w + exposure * unsure + spread)
}

/**
 * The 200 equally likely parts: w_k = max(1, nu centre / chi2_k), each with its mean and ratio. Parts that stop at
 * w = 1 are alike and kept as one with its share. Source: statistics, 4.6.
 *
 * @param into filled and returned, so that a batch needs no new arrays for each bin
 */
export function mixtureNodes(
  posterior: MixturePosterior,
  stretch: MixtureStretch,
  into: MixtureNodes = emptyNodes(),
): MixtureNodes {
  const chiSquares = chiSquareNodes(posterior.freedom)
  const scale = posterior.freedom * posterior.dispersion
  into.count = 0
  into.mean = 0
  for (let k = 0; k < MIXTURE_NODES; k++) {
    const w = Math.min(LARGEST_DISPERSION, Math.max(1, scale / chiSquares[k]!))
    // The chi-squares rise, so that once w has come down to 1 it stays there.
    const share = w === 1 ? MIXTURE_NODES - k : 1
    const mean = stretch.exposure * rateAt(posterior, w) + stretch.wasted
    into.means[k] = mean
    into.ratios[k] = ratioAt(posterior, w, stretch)
    into.shares[k] = share
    into.mean += (mean * share) / MIXTURE_NODES
    into.count = k + 1
    if (w === 1) break
  }
  return into
}
