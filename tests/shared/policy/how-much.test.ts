import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { PolicyInputError } from '#shared/policy/policy-input-error.ts'
import { priceOfLevels } from '#shared/policy/price-of-level.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { twoBinSize } from '#shared/policy/two-bin.ts'

// Poisson(40) over the protection interval; SciPy 1.17.1 poisson: ppf(0.95, 0.98, 0.99) = 51, 53, 55.
const known: PolicyInput = {
  demand: { meanPerDay: 10 },
  leadTime: { meanDays: 3 },
  reviewPeriodDays: 1,
  serviceLevel: 0.98,
}
const steady = [14, 9, 21, 12, 17, 8, 15, 19, 11, 13, 16, 10].map((quantity) => ({ days: 7, quantity }))

describe('the order quantity', () => {
  it('in whole packs costs no more than a pack more or less (equal cost at Q1 Q2 = Q*^2)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 500, noNaN: true }),
        fc.integer({ min: 1, max: 200 }),
        fc.double({ min: 0.5, max: 80, noNaN: true }),
        fc.double({ min: 0.05, max: 90, noNaN: true }),
        (meanPerDay, packSize, orderingCost, unitCost) => {
          const order = { packSize, orderingCost, unitCost, holdingRatePerYear: 0.2 }
          const { orderQuantity } = reorderPoint({ ...known, demand: { meanPerDay }, order })
          const cost = (q: number) => (meanPerDay * 365 * orderingCost) / q + (unitCost * 0.2 * q) / 2
          const least = cost(orderQuantity!)
          expect(cost(orderQuantity! + packSize)).toBeGreaterThanOrEqual(least * (1 - 1e-9))
          if (orderQuantity! > packSize)
            expect(cost(orderQuantity! - packSize)).toBeGreaterThanOrEqual(least * (1 - 1e-9))
        },
      ),
      { numRuns: 100, seed: 5 },
    )
  })

  it('names every bound that changed it, in order, with the quantity after it', () => {
    const order = { packSize: 10, quantity: 20, minimum: 90 }
    const got = reorderPoint({ ...known, order, capacity: 110, shelfLifeDays: 10 })
    const rows = got.explanation.map(({ label, value }) => [label, value])
    const first = rows.findIndex(([label]) => label === 'Order quantity')
    // 53 + 90 > 110 leaves 50; of 103 units in 10 days only the 5 % point of Poisson(100), 84, is sure: 30.
    expect(rows.slice(first, first + 4)).toEqual([
      ['Order quantity', '20'],
      ['Raised to the smallest order', '90'],
      ['Kept within the shelf', '50'],
      ['Kept within the shelf life', '30'],
    ])
    expect(got.orderQuantity).toBe(30)
    expect(got.warnings).toEqual(['stated-lead-time', 'expiry-cap', 'minimum-order'])
    expect(new Set(rows.map(([label]) => label)).size).toBe(rows.length)
  })
})

describe('two bins', () => {
  it('each hold B = u ceil(F^-1(p)/u)', () => {
    const sizes = { perBin: 60, front: 60, reserve: 60, total: 120, equal: true, fits: true }
    expect(twoBinSize({ ...known, order: { packSize: 20 } })).toEqual(sizes)
    expect(twoBinSize(known)).toMatchObject({ perBin: 53, total: 106 })
    expect(twoBinSize({ ...known, order: { packSize: 53 } })).toMatchObject({ perBin: 53 })
  })
  it('are unequal where the economic or smallest order is more than B', () => {
    // n(n + 1) 50^2 >= 2 x 3650 x 10 / 0.6 gives seven packs of 50.
    const order = { packSize: 50, orderingCost: 10, unitCost: 3, holdingRatePerYear: 0.2 }
    expect(twoBinSize({ ...known, order })).toMatchObject({ front: 350, reserve: 100, total: 450, equal: false })
    expect(twoBinSize({ ...known, order: { ...order, orderingCost: 0.1 } })).toMatchObject({ front: 100, equal: true })
    expect(twoBinSize({ ...known, order: { packSize: 20, minimum: 70 } })).toMatchObject({ front: 80, reserve: 60 })
  })
  it('say when the place is too small, and keep the need', () => {
    expect(twoBinSize({ ...known, capacity: 105 })).toMatchObject({ perBin: 53, fits: false })
    expect(twoBinSize({ ...known, capacity: 106 })).toMatchObject({ fits: true })
  })
  it('hold a pack at least, the pinned floor at least, and nothing is known of what was never counted', () => {
    expect(twoBinSize({ ...known, demand: { meanPerDay: 0 }, order: { packSize: 8 } })).toMatchObject({ perBin: 8 })
    expect(twoBinSize({ ...known, pinnedFloor: 70 })).toMatchObject({ perBin: 70 })
    expect(twoBinSize({ ...known, demand: null, intervals: [] })).toBeNull()
  })
})

describe('the price of an aim', () => {
  it('Poisson(40), Q 50, price 3 at 20 % a year', () => {
    // SciPy 1.17.1: L(r) = sum of (y - r) pmf(y) = 0.1293722, 0.0625747, 0.0285578; cdf = 0.9612598, 0.9800054, 0.9903212.
    const order = { packSize: 50, quantity: 50, unitCost: 3, holdingRatePerYear: 0.2 }
    const rows = priceOfLevels({ ...known, order }, [0.95, 0.98, 0.99])
    const figures = [
      [51, 0.1293722, 0.9612598],
      [53, 0.0625747, 0.9800054],
      [55, 0.0285578, 0.9903212],
    ] as const
    figures.forEach(([r, short, sure], i) => {
      const row = rows[i]!
      expect(row).toMatchObject({ reorderPoint: r, safetyStock: r - 40, orderQuantity: 50, cyclesPerYear: 73 })
      expect(row.cycleService).toBeCloseTo(sure, 7)
      expect(row.meanStock).toBeCloseTo(25 + r - 40 + short, 6)
      expect(row.holdingPerYear).toBeCloseTo(0.6 * (25 + r - 40 + short), 6)
      expect(row.shortPerYear).toBeCloseTo(73 * short, 5)
      expect(row.runOutsPerYear).toBeCloseTo(73 * (1 - sure), 5)
      expect(row.yearsBetweenRunOuts).toBeCloseTo(1 / (73 * (1 - sure)), 4)
    })
  })

  it('normal demand: safety stock 25, 41, 57 and 88 % above that of 95 %, units short 65, 84, 92, 98.6 % fewer', () => {
    // Statistics, section 5 (computed in R 4.2.2), to the digits printed there.
    const input: PolicyInput = {
      demand: { meanPerDay: 1e6, variancePerDay: 1e10 },
      ...{ leadTime: { meanDays: 1 }, serviceLevel: 0.95, method: 'normal', order: { quantity: 1e6 } },
    }
    const [base, ...others] = priceOfLevels(input, [0.95, 0.98, 0.99, 0.995, 0.999])
    const more = others.map((row) => Math.round(100 * (row.safetyStock / base!.safetyStock - 1)))
    const fewer = others.map((row) => 100 * (1 - row.shortPerYear! / base!.shortPerYear!))
    expect(more).toEqual([25, 41, 57, 88])
    ;[65, 84, 92, 98.6].forEach((printed, i) => expect(Math.abs(fewer[i]! - printed)).toBeLessThan(0.6))
  })

  it('names the levels the policy itself names, cut by shelf and floor alike', () => {
    const order = { packSize: 4, orderingCost: 5, unitCost: 2 }
    const input: PolicyInput = { ...known, demand: null, intervals: steady, order, capacity: 30, pinnedFloor: 3 }
    for (const row of priceOfLevels(input, [0.9, 0.98, 0.999])) {
      const policy = reorderPoint({ ...input, serviceLevel: row.serviceLevel })
      expect(row).toMatchObject({
        reorderPoint: policy.reorderPoint,
        safetyStock: policy.safetyStock,
        orderQuantity: policy.orderQuantity,
        cycleService: policy.achieved,
        cut: policy.warnings.includes('shelf-cannot-hold'),
      })
    }
  })

  it('leaves out what cannot be told: no price, no loss under the t law, no counts', () => {
    expect(priceOfLevels(known, [0.98])[0]).toMatchObject({ holdingPerYear: null })
    const student: PolicyInput = { ...known, demand: null, intervals: steady, method: 'normal' }
    expect(priceOfLevels(student, [0.98])[0]).toMatchObject({ meanStock: null, shortPerYear: null })
    expect(priceOfLevels({ ...known, demand: null, intervals: [] }, [0.98])).toEqual([])
    expect(priceOfLevels({ ...known, demand: { meanPerDay: 0 } }, [0.98])[0]!.yearsBetweenRunOuts).toBeNull()
    expect(priceOfLevels(known, [])).toEqual([])
    expect(() => priceOfLevels(known, [0.98, 1])).toThrow(PolicyInputError)
  })
})

describe('what else a result says of its level', () => {
  it('ready rate, m 6, aim 95 %: r 10 gives .9574, .9847, .9961 at Q 1, 5, 20 (statistics, 2.4)', () => {
    const rates = [1, 5, 20].map((quantity) => {
      const got = reorderPoint({ ...known, demand: { meanPerDay: 1.5 }, serviceLevel: 0.95, order: { quantity } })
      expect(got.reorderPoint).toBe(10)
      expect(got.fillRate).toBeCloseTo(got.readyRate!, 12)
      return got.readyRate!.toFixed(4)
    })
    expect(rates).toEqual(['0.9574', '0.9847', '0.9961'])
  })

  it('fill rate, normal: 98 % needs k 1.83, 1.64, 1.36, .90 at Q/sd .5, 1, 2, 5 (statistics, 2.4)', () => {
    const table = [
      [0.5, 1.83],
      [1, 1.64],
      [2, 1.36],
      [5, 0.9],
    ] as const
    const demand = { meanPerDay: 1e6, variancePerDay: 1e10 }
    for (const [ratio, k] of table) {
      const order = { quantity: ratio * 1e5 }
      const floor = { pinnedFloor: Math.round(1e6 + k * 1e5), serviceLevel: 0.5 }
      const got = reorderPoint({ demand, leadTime: { meanDays: 1 }, method: 'normal', order, ...floor })
      expect(Math.abs(got.fillRate! - 0.98)).toBeLessThan(4e-4)
    }
  })

  it('the fill rate is the one an aim in units served is held against', () => {
    for (const more of [{}, { demand: null, intervals: steady }]) {
      const got = reorderPoint({ ...known, ...more, serviceMeasure: 'fill', order: { quantity: 30 } })
      expect(got.fillRate).toBeCloseTo(got.achieved!, 9)
    }
    expect(reorderPoint({ ...known, demand: null, intervals: steady, method: 'normal' })).toMatchObject({
      fillRate: null,
      readyRate: null,
    })
  })

  it('what a small shelf can carry: F(capacity − pack), Poisson(40) at 40 is .5419 (SciPy 1.17.1)', () => {
    const cut = reorderPoint({ ...known, capacity: 60, order: { packSize: 20 } })
    expect(cut.shelfCarries).toBeCloseTo(0.54192, 4)
    expect(reorderPoint({ ...known, capacity: 60, order: { packSize: 20 }, pinnedFloor: 50 }).shelfCarries).toBe(
      cut.shelfCarries,
    )
    expect(reorderPoint({ ...known, capacity: 90 }).shelfCarries).toBeNull()
  })

  it('what lumpy counts can carry: 8 windows 88.9 %, 32 windows 97.0 % (statistics, 2.7)', () => {
    const lumpy = (count: number) =>
      reorderPoint({
        intervals: Array.from({ length: count }, (_, i) => ({ days: 4, quantity: [0, 0, 40, 3][i % 4]! })),
        ...{ leadTime: { meanDays: 4 }, serviceLevel: 0.98 },
      })
    expect(lumpy(8).warnings).toContain('lumpy')
    expect(lumpy(8).dataCarry).toBeCloseTo(8 / 9, 12)
    expect(lumpy(32).dataCarry).toBeCloseTo(32 / 33, 12)
    expect(reorderPoint({ ...known, demand: null, intervals: steady }).dataCarry).toBeNull()
  })

  it('how many units more counts would save', () => {
    const counted = { ...known, demand: null, intervals: steady }
    const got = reorderPoint(counted)
    const plugIn = reorderPoint({ ...counted, method: 'negative-binomial', estimate: 'plug-in' })
    expect(got.forFewCounts).toBe(got.computedReorderPoint! - plugIn.computedReorderPoint!)
    expect(got.forFewCounts).toBeGreaterThan(0)
    expect(plugIn.forFewCounts).toBeNull()
    expect(reorderPoint({ ...counted, intervals: steady.slice(0, 1) }).forFewCounts).toBeNull()
  })
})
