import { describe, expect, it } from 'vitest'
import file from '#tests/fixtures/stats/worked_examples.json' with { type: 'json' }
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { suggestedPacks } from '#shared/replenishment/suggested-packs.ts'
import { normalLoss } from '#shared/stats/normal-loss.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { likeliestNegativeBinomial } from './likeliest-negative-binomial.ts'

const sourceOf = (id: string) => {
  const row = file.rows.find((candidate) => candidate.id === id)
  if (!row) throw new Error(`${id} is not among the worked examples`)
  return row.source
}

/** Normal demand with known mean and variance per period over a lead time in the same periods. */
const normal = (mean: number, sd: number, lead: number, serviceLevel: number, more: Partial<PolicyInput> = {}) =>
  reorderPoint({
    demand: { meanPerDay: mean, variancePerDay: sd * sd },
    leadTime: { meanDays: lead, ...more.leadTime },
    serviceLevel,
    method: 'normal',
    ...Object.fromEntries(Object.entries(more).filter(([name]) => name !== 'leadTime')),
  } as PolicyInput)

/** A printed level and ours, which is the next whole unit up. */
const roundsUp = (got: number | null, printed: number, tolerance: number) => {
  expect(got! - printed).toBeGreaterThanOrEqual(-tolerance)
  expect(got! - printed).toBeLessThan(1 + tolerance)
}

const examples: Record<string, () => void> = {
  W46: () => {
    expect(Math.abs(normalQuantile(0.97) - 1.88)).toBeLessThan(0.005)
    roundsUp(normal(50, 5, 1, 0.97).reorderPoint, 59.4, 0.03)
  },
  W47: () => roundsUp(normal(50, 3, 2, 0.9).reorderPoint, 105.43, 0.02),
  W48: () => roundsUp(normal(30, 5, 10, 0.95).reorderPoint, 326.1, 0.1),
  W49: () => expect(normal(60, 0, 6, 0.9, { leadTime: { meanDays: 6, sdDays: 2 } }).reorderPoint).toBe(514),
  W50: () => roundsUp(normal(12_500, 0, 4, 0.97, { leadTime: { meanDays: 4, sdDays: 1 } }).reorderPoint, 73_500, 15),
  W51: () => {
    const got = normal(5, 0, 3, 0.95, { leadTime: { meanDays: 3, sdDays: 2 } })
    roundsUp(got.reorderPoint, 31.45, 0.01)
    expect(Math.sqrt(got.protectionDemand!.variance)).toBe(10)
  },
  W52: () => {
    const cycle = normal(250, 150, 2, 0.5, { pinnedFloor: 600 })
    expect(cycle.reorderPoint).toBe(600)
    expect(cycle.safetyStock).toBeCloseTo(100, 9)
    expect(Math.abs(Math.sqrt(cycle.protectionDemand!.variance) - 212)).toBeLessThan(0.2)
    expect(Math.abs(normalLoss(600, 500, Math.sqrt(cycle.protectionDemand!.variance)) - 43.86)).toBeLessThan(0.01)
    expect(Math.abs(cycle.achieved! - 0.68)).toBeLessThan(0.005)
    const fill = normal(250, 150, 2, 0.5, { pinnedFloor: 600, serviceMeasure: 'fill', order: { quantity: 1000 } })
    expect(Math.abs(fill.achieved! - 0.96)).toBeLessThan(0.005)
  },
  W53: () => {
    const got = normal(5000 / 365, 5, 10, 0.95, { reviewPeriodDays: 14 })
    roundsUp(got.reorderPoint! - 150, 218.97, 0.25)
    expect(Math.sqrt(got.protectionDemand!.variance)).toBeCloseTo(24.495, 3)
  },
  W54: () => {
    const order = { orderingCost: 20, unitCost: 1.25, holdingRatePerYear: 0.2 }
    expect(normal(50_000 / 365, 1, 1, 0.95, { order }).orderQuantity).toBe(2828)
  },
  W55: () => {
    const order = { orderingCost: 40, unitCost: 37.5, holdingRatePerYear: 0.2 }
    expect(normal(10_000 / 365, 1, 1, 0.95, { order }).orderQuantity).toBe(327)
  },
  W56: () => {
    const of = (days: number) =>
      reorderPoint({
        intervals: [200, 152, 100, 221, 287, 176, 151, 198, 246, 309, 98, 156].map((quantity) => ({ days, quantity })),
        ...{ leadTime: { meanDays: 1 }, serviceLevel: 0.9, method: 'normal', estimate: 'plug-in' },
      }).demand!
    expect(Math.abs(of(1).meanPerDay - 191.17)).toBeLessThan(0.01)
    expect(Math.abs(Math.sqrt(of(1).variancePerDay!) - 66.53)).toBeLessThan(0.01)
    // In weeks, 4.3 to the month.
    expect(Math.abs(of(4.3).meanPerDay - 44.46)).toBeLessThan(0.01)
    expect(Math.abs(Math.sqrt(of(4.3).variancePerDay!) - 32.09)).toBeLessThan(0.01)
  },
  W57: () => {
    // Twenty days at the upper limits of the classes, as often as printed.
    const limits = [39, 49, 59, 69, 79, 89, 99, 109]
    const seen = [2, 2, 3, 4, 5, 2, 1, 1].flatMap((times, i) => Array.from({ length: times }, () => limits[i]!))
    const intervals = seen.map((quantity) => ({ days: 1, quantity }))
    const got = reorderPoint({ intervals, leadTime: { meanDays: 1 }, serviceLevel: 0.9, method: 'empirical' })
    expect(got.reorderPoint).toBe(89)
  },
  W58: () => {
    const got = reorderPoint({
      demand: { meanPerDay: 1.5 },
      leadTime: { meanDays: 3 },
      reviewPeriodDays: 1,
      serviceLevel: 0.5,
      method: 'poisson',
      pinnedFloor: 8,
    })
    expect(got.protectionDemand!.mean).toBe(6)
    expect(Math.abs(1 - got.achieved! - 0.1528)).toBeLessThan(5e-5)
  },
  W59: () => {
    const counts = [109, 65, 22, 3, 1].flatMap((times, quantity) => Array.from({ length: times }, () => quantity))
    const got = reorderPoint({
      intervals: counts.map((quantity) => ({ days: 1, quantity })),
      leadTime: { meanDays: 1 },
      serviceLevel: 0.95,
      method: 'poisson',
      estimate: 'plug-in',
    })
    expect(got.demand!.meanPerDay).toBeCloseTo(0.61, 10)
    expect(got.demand!.variancePerDay).toBeCloseTo(0.611, 4)
    expect(got.demand!.dispersion).toBeCloseTo(1.0016, 4)
    expect(got.reorderPoint).toBe(2)
  },
  W60: () => {
    const mites = [70, 38, 17, 10, 9, 3, 2, 1].flatMap((times, quantity) =>
      Array.from({ length: times }, () => quantity),
    )
    const intervals = mites.map((quantity) => ({ days: 1, quantity }))
    const likeliest = likeliestNegativeBinomial(intervals)
    expect(Math.abs(likeliest.meanPerDay - 1.14667)).toBeLessThan(1e-5)
    expect(Math.abs(likeliest.meanPerDay / (likeliest.ratio - 1) - 1.0246)).toBeLessThan(1e-3)
    const input = { intervals, leadTime: { meanDays: 1 }, serviceLevel: 0.95 }
    expect(Math.abs(reorderPoint(input).demand!.variancePerDay! - 2.2736)).toBeLessThan(1e-4)
  },
  W61: () => {
    const days = 6 * 30.4
    const got = reorderPoint({
      intervals: [{ days, exposureDays: days - 40, quantity: 2200 }],
      leadTime: { meanDays: 3 },
      serviceLevel: 0.95,
      method: 'poisson',
    })
    expect(Math.abs(got.demand!.meanPerDay * 30.4 - 469.7)).toBeLessThan(0.1)
  },
  W62: () => expect(normal(12, 0, 90, 0.5).protectionDemand!.mean).toBe(1080),
  W63: () => {
    const months = { reorderPoint: 3 * 100, parLevel: 6 * 100, position: 250, packSize: 1, capacity: null }
    expect(suggestedPacks(months)).toBe(350)
  },
  W66: () => {
    expect(Math.abs(normal(100, 25, 1, 0.98).reorderPoint! - 151)).toBeLessThanOrEqual(1)
    const fill = normal(100, 25, 1, 0.98, { serviceMeasure: 'fill', order: { quantity: 100 } })
    expect(Math.abs(fill.reorderPoint! - 126)).toBeLessThanOrEqual(1)
  },
}

/** W64 is the factor of a smoothing forecast, which the product does not make; W65 a quantile, asserted with those. */
const leftOut = ['W64', 'W65']

it('every example from W46 on is asserted', () => {
  const ids = file.rows.map(({ id }) => id).filter((id) => id >= 'W46' && !leftOut.includes(id))
  expect(Object.keys(examples).sort()).toEqual(ids)
})

describe('textbook reorder points, order quantities and service levels', () => {
  for (const [id, check] of Object.entries(examples)) it(`${id}: ${sourceOf(id)}`, check)
})
