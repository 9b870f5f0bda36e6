import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import file from '#tests/fixtures/stats/reorder.open.json' with { type: 'json' }
import { chiSquareNodes } from '#shared/policy/chi-square-nodes.ts'
import {
  batchBuffers,
  computedReorderPoints,
  mixtureLevels,
  NOT_COVERED,
  packBatch,
} from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { PolicyInputError } from '#shared/policy/policy-input-error.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'

const double = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const interval = fc.record({
  days: double(0.5, 30),
  quantity: fc.integer({ min: -3, max: 400 }),
  censored: fc.option(fc.integer({ min: 0, max: 24 }).map((n) => n === 24)),
  weight: fc.option(fc.oneof(fc.constant(0), double(0.001, 1))),
})
const rate = fc.record({ a: double(0.1, 50), b: fc.oneof(fc.constant(0), double(0.1, 90)) })
const input: fc.Arbitrary<PolicyInput> = fc.record({
  intervals: fc.array(interval, { maxLength: 30 }),
  leadTime: fc.record({ meanDays: double(0, 20), sdDays: fc.option(double(0, 3)) }),
  reviewPeriodDays: double(0.1, 9),
  protectionExposureDays: fc.option(double(0.1, 40)),
  wastagePerDay: fc.option(double(0, 3)),
  serviceLevel: double(0.5, 0.9999),
  method: fc.constantFrom('auto', 'negative-binomial', 'poisson'),
  prior: fc.option(fc.record({ nu0: double(0.5, 40), w0: double(0.5, 9), rate: fc.option(rate) })),
})

describe('a batch', () => {
  it('gives every bin exactly what its policy says, the rest by the policy itself', () => {
    fc.assert(
      fc.property(fc.array(input, { maxLength: 8 }), (inputs) => {
        expect(computedReorderPoints(inputs)).toEqual(inputs.map((each) => reorderPoint(each).computedReorderPoint))
      }),
      { numRuns: 30, seed: 11 },
    )
  })

  it('covers the mixture cases of the case file (R 4.2.2, agreed by SciPy) and meets them', () => {
    const rows = file.rows.filter(({ method }) => method === 'nb_predictive_mix')
    const inputs = rows.map((row): PolicyInput => {
      const options = row.options as unknown as { nu0: number; w0: number }
      return {
        intervals: row.history!.map(({ days, consumption }) => ({ days, quantity: consumption! })),
        leadTime: { meanDays: row.lead_time_mean_days, sdDays: row.lead_time_sd_days },
        reviewPeriodDays: row.review_period_days,
        serviceLevel: row.service_level,
        method: 'negative-binomial',
        prior: { nu0: options.nu0, w0: options.w0 },
      }
    })
    const { batch, covered } = packBatch(inputs)
    expect(covered.length).toBe(rows.length)
    const points = mixtureLevels(batch)
    covered.forEach((i, k) => {
      const { fragile, expected } = rows[i]!
      expect(Math.abs(points[k]! - expected.reorder_point)).toBeLessThanOrEqual(fragile ? 1 : 0)
    })
  })

  it('moves to another thread without a copy and works there', () => {
    const inputs = [4, 9].map((quantity): PolicyInput => {
      return { intervals: [{ days: 7, quantity }], leadTime: { meanDays: 3 }, serviceLevel: 0.98 }
    })
    const { batch } = packBatch(inputs)
    const before = mixtureLevels(batch)
    const moved = structuredClone(batch, { transfer: batchBuffers(batch) })
    expect(batch.quantity.length).toBe(0)
    expect(mixtureLevels(moved)).toEqual(before)
  })

  it('leaves the t law above a mean of 1,000 to the policy', () => {
    const intervals = [9000, 8000, 9500].map((quantity) => ({ days: 7, quantity }))
    const large: PolicyInput = { intervals, leadTime: { meanDays: 3 }, serviceLevel: 0.98 }
    expect([...mixtureLevels(packBatch([large]).batch)]).toEqual([NOT_COVERED])
    expect(mixtureLevels(packBatch([{ ...large, method: 'negative-binomial' }]).batch)[0]).toBeGreaterThan(3000)
    expect(computedReorderPoints([large])[0]).toBe(reorderPoint(large).reorderPoint)
  })

  it('refuses what a policy refuses', () => {
    expect(() => packBatch([{ intervals: [], leadTime: { meanDays: -1 }, serviceLevel: 0.9 }])).toThrow(
      PolicyInputError,
    )
    expect(computedReorderPoints([])).toEqual([])
  })
})

it('chi-square nodes between whole degrees of freedom lie where the quantile lies, to 1e-10', () => {
  for (const freedom of [6.01, 7.37, 23.6, 24.4, 61.7, 127.3, 128.9, 530.2, 2047.1]) {
    const nodes = chiSquareNodes(freedom)
    for (let k = 0; k < 200; k += 3)
      expect(Math.abs(nodes[k]! / chiSquareQuantile((k + 0.5) / 200, freedom) - 1)).toBeLessThan(1e-10)
  }
})
