import type { DemandLaw } from './demand-law.ts'
import type { AnsweredMethod } from './policy-result.ts'

/** A stretch of time to cover: calendar days, days of exposure, and the variance of the exposure (days squared). */
export interface Horizon {
  days: number
  exposure: number
  variance: number
}

/** A method fitted to the data of one bin: it answers the law of demand over any stretch. */
export interface Fitted {
  method: AnsweredMethod
  meanPerDay: number
  variancePerDay: number | null
  dispersion: number | null
  /** Whether a fill rate may be asked of it (plug-in families and the mixture). */
  answersFill: boolean
  /** The model with its figures put in, for the explanation. */
  model: string
  /** With rates of like wards: the share of own counts in the rate, and units per day by them and by both */
  likeWards?: { own: number; theirsPerDay: number; perDay: number } | null
  lawOver(horizon: Horizon): DemandLaw
}

/** Demand and lead time combined: m = mu P, v = sigma^2 P + mu^2 Var P. Source: statistics, 1.2. */
export function combinedMoments(
  meanPerDay: number,
  variancePerDay: number,
  horizon: Horizon,
): { mean: number; variance: number } {
  return {
    mean: meanPerDay * horizon.exposure,
    variance: variancePerDay * horizon.exposure + meanPerDay * meanPerDay * horizon.variance,
  }
}

/** Wastage counts from this share of use on; below it is lost in the noise (statistics, 4.0). */
export const WASTAGE_THRESHOLD = 0.02

/** Wastage per calendar day that is added to the demand: the given rate when it is above 2 % of use, else 0. */
export function countedWastage(wastagePerDay: number, meanPerDay: number): number {
  return wastagePerDay > WASTAGE_THRESHOLD * meanPerDay ? wastagePerDay : 0
}
