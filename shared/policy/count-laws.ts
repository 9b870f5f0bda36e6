import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { poissonLoss } from '#shared/stats/poisson-loss.ts'
import { pointLaw } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'

/** A variance this close to the mean, relatively, is Poisson: the size would pass 1e7 and lose digits. */
const NEARLY_POISSON = 1e-7

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

/** Beyond this the mass at zero underflows and the recurrence cannot start. */
const LARGEST_EXPONENT = 700
/** Longest table of distribution values kept; further out each value is computed on its own. */
const LONGEST_TABLE = 20_000

/**
 * Equal mixture of negative-binomial laws given by mean and variance-to-mean ratio (above 1) of each part.
 *
 * The masses of all parts run by their recurrence f(y+1) = f(y) (k + y)/(y + 1) (1 - q), so that one pass fills a table
 * of F(0), F(1), ...; this is what keeps a policy under a millisecond. Parts whose mass at 0 underflows use the
 * incomplete beta function instead.
 * Shape: both arrays of one length. `mean` and `variance` are the figures to report for the mixture.
 * Source: statistics, 4.6. Accuracy: absolute error < 1e-11.
 */
export function mixtureLaw(
  means: Float64Array,
  ratios: Float64Array,
  reported: { mean: number; variance: number },
): DemandLaw {
  const count = means.length
  const sizes = means.map((mean, k) => mean / (ratios[k]! - 1))
  const failures = ratios.map((ratio) => 1 - 1 / ratio)
  const masses = sizes.map((size, k) => Math.exp(-size * Math.log(ratios[k]!)))
  const fits = sizes.every((size, k) => size * Math.log(ratios[k]!) < LARGEST_EXPONENT)
  const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0)
  const table = [sum(masses) / count]

  const extendTo = (r: number) => {
    for (let y = table.length - 1; y < r; y++) {
      const step = 1 / (y + 1)
      let added = 0
      for (let k = 0; k < count; k++) {
        const mass = masses[k]! * (sizes[k]! + y) * failures[k]! * step
        masses[k] = mass
        added += mass
      }
      table.push(Math.min(1, table[y]! + added / count))
    }
  }
  const direct = (value: (size: number, probability: number) => number) => {
    let total = 0
    for (let k = 0; k < count; k++) total += value(sizes[k]!, 1 / ratios[k]!)
    return total / count
  }
  return {
    ...reported,
    cdf: (r) => {
      if (r < 0) return 0
      const whole = Math.floor(r)
      if (!fits || whole > LONGEST_TABLE) return direct((size, q) => negativeBinomialCdf(whole, size, q))
      extendTo(whole)
      return table[whole]!
    },
    loss: (r) => direct((size, q) => negativeBinomialLoss(r, size, q)),
  }
}
