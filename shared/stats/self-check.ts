import { chiSquareQuantile } from './chi-square-quantile.ts'
import { gammaQuantile } from './gamma-quantile.ts'
import { lognormalQuantile } from './lognormal-quantile.ts'
import { negativeBinomialQuantile } from './negative-binomial-quantile.ts'
import { normalQuantile } from './normal-quantile.ts'
import { poissonQuantile } from './poisson-quantile.ts'
import { studentQuantile } from './student-quantile.ts'

/** One figure the distributions must give. */
export interface StatisticsCheck {
  what: string
  got: () => number
  expected: number
}

const check = (what: string, got: () => number, expected: number): StatisticsCheck => ({ what, got, expected })
const negbin = (p: number, size: number, mean: number): number =>
  negativeBinomialQuantile(p, size, size / (size + mean))

/** Rows of `quantiles.open.json` (R 4.2.2, checked with 40-digit arithmetic); chi-square: SciPy 1.17.1. */
const checks: readonly StatisticsCheck[] = [
  check('normal (5, 2) at 0.995', () => normalQuantile(0.995, 5, 2), 10.1516586070978),
  check('normal (10000, 250) at 0.9999', () => normalQuantile(0.9999, 10_000, 250), 10929.7541213639),
  check('t (4) at 0.95', () => studentQuantile(0.95, 4), 2.13184678632665),
  check('t (31) at 0.99', () => studentQuantile(0.99, 31), 2.45282419340265),
  check('t (120) at 0.999', () => studentQuantile(0.999, 120), 3.15953874331711),
  check('Poisson (0.693) at 0.98', () => poissonQuantile(0.98, 0.693), 3),
  check('Poisson (1) at 0.995', () => poissonQuantile(0.995, 1), 4),
  check('Poisson (20) at 0.9999', () => poissonQuantile(0.9999, 20), 39),
  check('Poisson (1000) at 0.98', () => poissonQuantile(0.98, 1000), 1065),
  check('negative binomial (0.5, mean 2) at 0.999', () => negbin(0.999, 0.5, 2), 24),
  check('negative binomial (1, mean 1) at 0.95', () => negbin(0.95, 1, 1), 4),
  check('negative binomial (50, mean 7) at 0.95', () => negbin(0.95, 50, 7), 12),
  check('negative binomial (1000, mean 1000) at 0.95', () => negbin(0.95, 1000, 1000), 1074),
  check('gamma (1e4) at 0.98', () => gammaQuantile(0.98, 1e4, 1), 10206.4459238853),
  check('gamma (1e6) at 0.98', () => gammaQuantile(0.98, 1e6, 1), 1002054.82138003),
  check('lognormal (0, 1) at 0.9999', () => lognormalQuantile(0.9999, 0, 1), 41.2238299278443),
  check('lognormal (4, 1.5) at 0.99', () => lognormalQuantile(0.99, 4, 1.5), 1789.19631336179),
  check('chi-square (4) at 0.95', () => chiSquareQuantile(0.95, 4), 9.487729036781154),
  check('chi-square (11) at 0.0025', () => chiSquareQuantile(0.0025, 11), 2.2321385532421965),
]

/**
 * Whether the distributions still give known figures, so that a changed library is found at the start of a
 * program and not in an order. Takes a few milliseconds. Source: statistics, 10.3.
 *
 * @throws {Error} naming the first figure that is off by more than 1e-9, relatively
 */
export function checkStatistics(list: readonly StatisticsCheck[] = checks): void {
  for (const { what, got, expected } of list) {
    const value = got()
    if (!(Math.abs(value - expected) <= 1e-9 * Math.abs(expected)))
      throw new Error(`the statistics library gives a wrong figure, ${what}: ${value} for ${expected}`)
  }
}
