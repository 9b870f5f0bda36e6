import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { poissonLoss } from '#shared/stats/poisson-loss.ts'
import { pointLaw } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'

/** A variance this close to the mean, relatively, is Poisson: the size would pass 1e7 and lose digits. */
export const NEARLY_POISSON = 1e-7

/**
 * Negative-binomial demand by moments: size m^2/(v - m), probability m/v; Poisson where v is not above m
 * (statistics, 2.2: a variance below the mean, seen in few intervals, is noise). `variance` is reported as given.
 */
export function negativeBinomialLaw(mean: number, variance: number): DemandLaw {
  if (mean <= 0) return pointLaw(0)
  if (variance <= mean * (1 + NEARLY_POISSON)) {
    return { mean, variance, cdf: (r) => poissonCdf(r, mean), loss: (r) => poissonLoss(r, mean) }
  }
  const size = (mean * mean) / (variance - mean)
  const probability = mean / variance
  return {
    mean,
    variance,
    cdf: (r) => negativeBinomialCdf(r, size, probability),
    loss: (r) => negativeBinomialLoss(r, size, probability),
  }
}
