import { gammaCdf } from '#shared/stats/gamma-cdf.ts'
import { gammaLoss } from '#shared/stats/gamma-loss.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'
import { lognormalCdf } from '#shared/stats/lognormal-cdf.ts'
import { lognormalLoss } from '#shared/stats/lognormal-loss.ts'
import { lognormalQuantile } from '#shared/stats/lognormal-quantile.ts'
import { normalCdf } from '#shared/stats/normal-cdf.ts'
import { normalLoss } from '#shared/stats/normal-loss.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { studentCdf } from '#shared/stats/student-cdf.ts'
import { studentQuantile } from '#shared/stats/student-quantile.ts'
import { pointLaw } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'

/** Normal demand with known mean and variance (statistics, 2.2). */
export function normalLaw(mean: number, variance: number): DemandLaw {
  if (variance <= 0) return pointLaw(mean)
  const sd = Math.sqrt(variance)
  return {
    mean,
    variance,
    cdf: (r) => normalCdf((r - mean) / sd),
    loss: (r) => normalLoss(r, mean, sd),
    exactQuantile: (p) => mean + normalQuantile(p) * sd,
  }
}

/** Normal demand with estimated parameters: t with `degreesOfFreedom` around the mean (statistics, 4.5). */
export function studentLaw(mean: number, variance: number, degreesOfFreedom: number): DemandLaw {
  if (variance <= 0) return pointLaw(mean)
  const scale = Math.sqrt(variance)
  return {
    mean,
    variance,
    cdf: (r) => studentCdf((r - mean) / scale, degreesOfFreedom),
    exactQuantile: (p) => mean + studentQuantile(p, degreesOfFreedom) * scale,
  }
}

/** Gamma demand by moments: shape m^2/v, scale v/m (statistics, 2.2). Needs a mean above 0 unless nothing varies. */
export function gammaLaw(mean: number, variance: number): DemandLaw {
  if (variance <= 0) return pointLaw(mean)
  const shape = (mean * mean) / variance
  const scale = variance / mean
  return {
    mean,
    variance,
    cdf: (r) => gammaCdf(r, shape, scale),
    loss: (r) => gammaLoss(r, shape, scale),
    exactQuantile: (p) => gammaQuantile(p, shape, scale),
  }
}

/** Lognormal demand by moments: s^2 = ln(1 + v/m^2), mean log = ln m - s^2/2 (statistics, 2.2). */
export function lognormalLaw(mean: number, variance: number): DemandLaw {
  if (variance <= 0) return pointLaw(mean)
  const squared = Math.log1p(variance / (mean * mean))
  const meanLog = Math.log(mean) - squared / 2
  const sdLog = Math.sqrt(squared)
  return {
    mean,
    variance,
    cdf: (r) => lognormalCdf(r, meanLog, sdLog),
    loss: (r) => lognormalLoss(r, meanLog, sdLog),
    exactQuantile: (p) => lognormalQuantile(p, meanLog, sdLog),
  }
}
