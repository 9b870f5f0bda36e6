import { describe, expect, it } from 'vitest'
import file from '#tests/fixtures/stats/reorder.open.json' with { type: 'json' }
import computed from '#tests/fixtures/stats/policy-cases.json' with { type: 'json' }
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

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

/** How each method of the case file is asked for; the two that are no method of the interface are left out. */
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
const LEFT_OUT = ['nb_mle', 'compound_poisson']

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
    expect([...methods].filter((method) => !(method in asked)).sort()).toEqual([...LEFT_OUT].sort())
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
