import { describe, expect, it } from 'vitest'
import file from '#tests/fixtures/stats/reorder.open.json' with { type: 'json' }
import computed from '#tests/fixtures/stats/policy-cases.json' with { type: 'json' }
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { negativeBinomialLaw } from '#shared/policy/count-laws.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import { likeliestNegativeBinomial } from './likeliest-negative-binomial.ts'

interface Row {
  id: number
  tag: string
  method: string
  options: Record<string, number> | null
  history: { days: number; consumption: number; stockout?: boolean }[] | null
  lead_time_mean_days: number
  lead_time_sd_days: number
  review_period_days: number
  service_level: number
  expected: Record<string, number | null>
  fragile: boolean
}

/** How each method of the case file is asked for; the two that are no method of the interface are asserted below. */
const asked: Record<string, (row: Row) => Partial<PolicyInput>> = {
  normal_plugin: () => ({ method: 'normal', estimate: 'plug-in' }),
  normal_predictive_t: () => ({ method: 'normal', estimate: 'predictive' }),
  poisson_plugin: () => ({ method: 'poisson', estimate: 'plug-in' }),
  gamma_poisson_predictive: ({ options }) => ({
    method: 'poisson',
    estimate: 'predictive',
    prior: { rate: { a: options!.a0!, b: options!.b0! } },
  }),
  nb_plugin: () => ({ method: 'negative-binomial', estimate: 'plug-in' }),
  nb_predictive_mix: ({ options }) => ({
    method: 'negative-binomial',
    prior: { nu0: options!.nu0!, w0: options!.w0! },
  }),
  gamma_ltd: () => ({ method: 'gamma' }),
  lognormal_ltd: () => ({ method: 'lognormal' }),
  poisson_censored_mle: () => ({ method: 'poisson', estimate: 'plug-in' }),
  normal_censored_mle: () => ({ method: 'normal', estimate: 'plug-in' }),
  bootstrap_exact: () => ({ method: 'bootstrap' }),
  overlap_empirical: () => ({ method: 'empirical' }),
  fill_rate_normal: ({ options }) => ({
    method: 'normal',
    estimate: 'plug-in',
    serviceMeasure: 'fill',
    order: { quantity: options!.Q! },
  }),
  fill_rate_poisson: ({ options }) => ({
    method: 'poisson',
    estimate: 'plug-in',
    serviceMeasure: 'fill',
    order: { quantity: options!.Q! },
  }),
}
const NO_METHOD = ['nb_mle', 'compound_poisson']

const inputOf = (row: Row): PolicyInput => ({
  intervals: row.history!.map(({ days, consumption, stockout }) => ({
    days,
    quantity: consumption,
    censored: stockout ?? false,
  })),
  leadTime: { meanDays: row.lead_time_mean_days, sdDays: row.lead_time_sd_days },
  reviewPeriodDays: row.review_period_days,
  serviceLevel: row.service_level,
  ...asked[row.method]!(row),
})

const near = (got: number | null | undefined, expected: number | null | undefined, relative = 1e-9) => {
  if (expected === null || expected === undefined) return
  expect(Math.abs(got! - expected)).toBeLessThanOrEqual(relative * Math.max(Math.abs(expected), 1e-9))
}

const rows = file.rows as unknown as Row[]

describe('reorder.open.json (R 4.2.2, agreed by an independent SciPy program)', () => {
  it('covers every method of the interface', () => {
    const methods = new Set(rows.map((row) => row.method))
    expect([...methods].filter((method) => !(method in asked)).sort()).toEqual([...NO_METHOD].sort())
  })

  for (const row of rows.filter(({ method }) => method in asked)) {
    it(`${row.id} ${row.tag} ${row.method}`, () => {
      const got = reorderPoint(inputOf(row))
      const { expected } = row
      if (row.fragile) expect(Math.abs(got.computedReorderPoint! - expected.reorder_point!)).toBeLessThanOrEqual(1)
      else expect(got.computedReorderPoint).toBe(expected.reorder_point)
      expect(got.reorderPoint).toBe(got.computedReorderPoint)
      // The Tobit figures of the file stop at 1e-8 (R optim); ours agree with 30-digit mpmath to 1e-14.
      const relative = row.method === 'normal_censored_mle' ? 1e-7 : 1e-9
      near(got.demand!.meanPerDay, expected.mu, relative)
      near(got.demand!.variancePerDay, expected.s2, relative)
      near(got.demand!.days, expected.T)
      near(got.protectionDays, expected.P)
      near(got.protectionDemand!.mean, expected.ltd_mean, relative)
      near(got.protectionDemand!.variance, expected.ltd_var ?? expected.ltd_var_at_w_post, relative)
      near(got.achieved, row.method.startsWith('fill') ? expected.fill_at : expected.cdf_at, 1e-8)
    })
  }
})

describe('what the interface has no method for', () => {
  for (const row of rows.filter(({ method }) => method === 'nb_mle'))
    it(`${row.id} ${row.tag}: the likeliest negative binomial, and its level as known demand`, () => {
      const { expected } = row
      const seen = row.history!.map(({ days, consumption }) => ({ days, quantity: consumption }))
      const likeliest = likeliestNegativeBinomial(seen)
      near(likeliest.meanPerDay, expected.mu, 1e-5)
      near(likeliest.ratio, expected.w_mle, 1e-4)
      near(likeliest.logLikelihood, expected.loglik, 1e-9)
      const got = reorderPoint({
        demand: { meanPerDay: expected.mu!, variancePerDay: expected.mu! * expected.w_mle! },
        leadTime: { meanDays: row.lead_time_mean_days },
        reviewPeriodDays: row.review_period_days,
        serviceLevel: row.service_level,
        method: 'negative-binomial',
      })
      expect(got.reorderPoint).toBe(expected.reorder_point)
      near(got.achieved, expected.cdf_at, 1e-8)
      near(got.protectionDemand!.variance, expected.ltd_var)
    })

  for (const row of rows.filter(({ method }) => method === 'compound_poisson'))
    it(`${row.id} ${row.tag}: issues of several units, by Panjer's recursion and our quantile of it`, () => {
      const { expected } = row
      const { orders_per_day, size_pmf } = row.options as unknown as { orders_per_day: number; size_pmf: number[] }
      const days = row.lead_time_mean_days + row.review_period_days
      const cdf = compoundPoissonCdf(orders_per_day * days, size_pmf)
      expect(integerQuantile(cdf, row.service_level)).toBe(expected.reorder_point)
      near(cdf(expected.reorder_point!), expected.cdf_at)
      near(cdf(expected.reorder_point! - 1), expected.cdf_below)
    })

  it('logarithmic sizes make the negative binomial (M. H. Quenouille, Biometrics 5, 1949)', () => {
    const [mean, ratio] = [12, 3]
    const q = 1 - 1 / ratio
    const sizes = Array.from({ length: 400 }, (_, j) => -(q ** (j + 1)) / ((j + 1) * Math.log(1 - q)))
    const cdf = compoundPoissonCdf((mean / (ratio - 1)) * Math.log(ratio), sizes)
    const law = negativeBinomialLaw(mean, mean * ratio)
    for (const r of [0, 5, 12, 30, 60]) expect(Math.abs(cdf(r) - law.cdf(r))).toBeLessThan(1e-12)
  })
})

/** g_0 = exp(-m), g_s = (m/s) sum of j f_j g_(s-j). Source: H. H. Panjer, ASTIN Bulletin 12 (1981). */
function compoundPoissonCdf(issues: number, sizes: readonly number[]): (r: number) => number {
  const masses = [Math.exp(-issues)]
  const massAt = (s: number): number => {
    for (let at = masses.length; at <= s; at++) {
      let sum = 0
      for (let j = 1; j <= Math.min(at, sizes.length); j++) sum += j * sizes[j - 1]! * masses[at - j]!
      masses.push((issues / at) * sum)
    }
    return masses[s]!
  }
  return (r) => {
    let reached = 0
    for (let s = 0; s <= r; s++) reached += massAt(s)
    return reached
  }
}

describe('policy-cases.json (make_policy_cases.py: SciPy, written apart from this code)', () => {
  computed.rows.forEach((row, i) => {
    it(`${i} ${row.kind}`, () => {
      const got = reorderPoint(row.input as PolicyInput)
      expect(got.computedReorderPoint).toBe(row.expected.reorderPoint)
      near(got.achieved, row.expected.achieved, 1e-8)
      near(got.protectionDemand!.mean, row.expected.mean, 1e-8)
      near(got.demand!.meanPerDay, row.expected.meanPerDay, 1e-8)
      near(got.demand!.variancePerDay, row.expected.variancePerDay, 1e-7)
    })
  })
})
