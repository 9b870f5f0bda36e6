import { describe, expect, it } from 'vitest'
import quantiles from '#tests/fixtures/stats/quantiles.open.json' with { type: 'json' }
import losses from '#tests/fixtures/stats/loss.json' with { type: 'json' }
import { gammaLoss } from '#shared/stats/gamma-loss.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'
import { lognormalLoss } from '#shared/stats/lognormal-loss.ts'
import { lognormalQuantile } from '#shared/stats/lognormal-quantile.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'
import { negativeBinomialQuantile } from '#shared/stats/negative-binomial-quantile.ts'
import { normalLoss } from '#shared/stats/normal-loss.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { poissonLoss } from '#shared/stats/poisson-loss.ts'
import { poissonQuantile } from '#shared/stats/poisson-quantile.ts'
import { studentQuantile } from '#shared/stats/student-quantile.ts'

type Params = Record<string, number>

const at = (params: Params, name: string): number => {
  const value = params[name]
  if (value === undefined) throw new Error(`the fixture row lacks ${name}`)
  return value
}
const probability = (q: Params) => at(q, 'size') / (at(q, 'size') + at(q, 'mu'))

const quantileOf: Record<string, (p: number, q: Params) => number> = {
  normal: (p, q) => normalQuantile(p, at(q, 'mean'), at(q, 'sd')),
  t: (p, q) => studentQuantile(p, at(q, 'df')),
  poisson: (p, q) => poissonQuantile(p, at(q, 'lambda')),
  negbin: (p, q) => negativeBinomialQuantile(p, at(q, 'size'), probability(q)),
  gamma: (p, q) => gammaQuantile(p, at(q, 'shape'), at(q, 'scale')),
  lognormal: (p, q) => lognormalQuantile(p, at(q, 'meanlog'), at(q, 'sdlog')),
}
const cdfOf: Record<string, (x: number, q: Params) => number> = {
  poisson: (x, q) => poissonCdf(x, at(q, 'lambda')),
  negbin: (x, q) => negativeBinomialCdf(x, at(q, 'size'), probability(q)),
}
const lossOf: Record<string, (r: number, q: Params) => number> = {
  normal: (r, q) => normalLoss(r, at(q, 'mean'), at(q, 'sd')),
  poisson: (r, q) => poissonLoss(r, at(q, 'lambda')),
  negbin: (r, q) => negativeBinomialLoss(r, at(q, 'size'), probability(q)),
  gamma: (r, q) => gammaLoss(r, at(q, 'shape'), at(q, 'scale')),
  lognormal: (r, q) => lognormalLoss(r, at(q, 'meanlog'), at(q, 'sdlog')),
}

describe('quantiles.open.json (R 4.2.2, checked with 40-digit arithmetic)', () => {
  for (const row of quantiles.rows) {
    it(`${row.id} ${row.family} ${JSON.stringify(row.params)} p=${row.p}`, () => {
      const params = row.params as unknown as Params
      const got = quantileOf[row.family]!(row.p, params)
      if (row.tolerance === 'exact integer') expect(got).toBe(row.quantile)
      else if (row.tie) expect([row.quantile, row.quantile + 1]).toContain(got)
      else if (row.tolerance === 'rel 1e-9')
        expect(Math.abs(got - row.quantile)).toBeLessThanOrEqual(1e-9 * Math.abs(row.quantile))
      else {
        expect(row.tolerance).toBe('underflow zone: 0 or rel 1e-6')
        expect(got === 0 || Math.abs(got / row.quantile - 1) < 1e-6).toBe(true)
      }
      const cdf = cdfOf[row.family]
      if (cdf) expect(Math.abs(cdf(row.quantile, params) - row.cdf_at_q)).toBeLessThan(1e-11)
    })
  }
})

describe('loss.json (mpmath, 40-50 digits)', () => {
  for (const row of losses.rows) {
    it(`${row.id} ${row.family} ${JSON.stringify(row.params)} r=${row.r}`, () => {
      const got = lossOf[row.family]!(row.r, row.params as unknown as Params)
      const allowed = row.loss > 1e-12 ? 1e-9 * row.loss : 1e-12
      expect(Math.abs(got - row.loss)).toBeLessThanOrEqual(allowed)
      // What is left over, r - m + L(r), keeps the absolute accuracy of its terms.
      const left = row.r - row.mean + got
      expect(Math.abs(left - row.complementary)).toBeLessThanOrEqual(1e-9 * Math.max(row.loss, Math.abs(row.r), 1))
    })
  }
})
