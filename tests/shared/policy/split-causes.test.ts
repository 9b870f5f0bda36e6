import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { PolicyInputError } from '#shared/policy/policy-input-error.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { CAUSES_OF_CHANGE, splitCauses } from '#shared/policy/split-causes.ts'

// Known Poisson demand, so that every level is a Poisson quantile (SciPy 1.17.1): ppf(0.98, 40) = 53.
const known: PolicyInput = {
  demand: { meanPerDay: 10 },
  leadTime: { meanDays: 3 },
  reviewPeriodDays: 1,
  serviceLevel: 0.98,
}

describe('the parts of a move', () => {
  it.each([
    // ppf(0.98, [44, 60, 80, 20]) = 58, 76, 99, 30; ppf(0.99, 40) = 55
    ['use', { demand: { meanPerDay: 11 } }, 58 - 53],
    ['rhythm', { reviewPeriodDays: 3 }, 76 - 53],
    ['delivery', { leadTime: { meanDays: 5 } }, 76 - 53],
    ['planned-change', { protectionExposureDays: 8 }, 99 - 53],
    ['planned-change', { protectionExposureDays: 2 }, 30 - 53],
    ['aim', { serviceLevel: 0.99 }, 55 - 53],
    ['limits', { capacity: 50, order: { packSize: 10 } }, 40 - 53],
  ])('%s alone: %j', (what, change, units) => {
    expect(splitCauses(known, { ...known, ...change })).toEqual([{ what, units }])
  })

  it('like wards alone', () => {
    const before = { ...known, demand: null, intervals: [{ days: 7, quantity: 9 }] }
    const after = { ...before, prior: { nu0: 8, w0: 1, rate: { a: 40, b: 20 } } }
    const units = reorderPoint(after).reorderPoint! - reorderPoint(before).reorderPoint!
    expect(units).not.toBe(0)
    expect(splitCauses(before, after)).toEqual([{ what: 'like-wards', units }])
  })

  it('one after the other: more use, then a longer rhythm, then a smaller shelf', () => {
    // ppf(0.98, [40, 44, 66]) = 53, 58, 83; the shelf then holds 70 less one pack.
    const after = { ...known, demand: { meanPerDay: 11 }, reviewPeriodDays: 3, capacity: 71 }
    expect(splitCauses(known, after)).toEqual([
      { what: 'use', units: 5 },
      { what: 'rhythm', units: 25 },
      { what: 'limits', units: -13 },
    ])
  })

  it('keeps what is planned while the days to cover change', () => {
    const doubled = { ...known, protectionExposureDays: 8 }
    const longer = { ...known, reviewPeriodDays: 3, protectionExposureDays: 12 }
    expect(splitCauses(doubled, longer).map(({ what }) => what)).toEqual(['rhythm'])
  })

  it('hands on what cannot be computed half way', () => {
    const before: PolicyInput = {
      ...{ ...known, demand: null, intervals: [4, 9, 6].map((quantity) => ({ days: 1, quantity })) },
      method: 'normal',
    }
    const after: PolicyInput = { ...before, intervals: [{ days: 1, quantity: 8 }], method: 'auto' }
    const units = reorderPoint(after).reorderPoint! - reorderPoint(before).reorderPoint!
    expect(splitCauses(before, after)).toEqual([{ what: 'aim', units }])
  })

  it('says nothing of no move, or of a place without a figure', () => {
    expect(splitCauses(known, { ...known })).toEqual([])
    expect(splitCauses(known, { ...known, demand: null, intervals: [] })).toEqual([])
    expect(() => splitCauses(known, { ...known, serviceLevel: 2 })).toThrow(PolicyInputError)
  })

  it('adds up, whatever changed', () => {
    const double = (min: number, max: number) => fc.double({ min, max, noNaN: true })
    const input: fc.Arbitrary<PolicyInput> = fc.record({
      intervals: fc.array(fc.record({ days: double(1, 9), quantity: fc.integer({ min: 0, max: 30 }) }), {
        ...{ minLength: 1, maxLength: 12 },
      }),
      leadTime: fc.record({ meanDays: double(1, 5) }),
      reviewPeriodDays: double(0, 7),
      protectionExposureDays: fc.option(double(1, 20)),
      wastagePerDay: double(0, 1),
      serviceLevel: double(0.9, 0.999),
      prior: fc.option(fc.record({ nu0: double(1, 9), w0: double(1, 4) })),
      capacity: fc.option(fc.integer({ min: 5, max: 60 })),
      pinnedFloor: fc.option(fc.integer({ min: 0, max: 20 })),
    })
    fc.assert(
      fc.property(input, input, (before, after) => {
        const parts = splitCauses(before, after)
        const move = reorderPoint(after).reorderPoint! - reorderPoint(before).reorderPoint!
        expect(parts.reduce((sum, { units }) => sum + units, 0)).toBe(move)
        expect(parts.every(({ units }) => units !== 0)).toBe(true)
        const order = parts.map(({ what }) => CAUSES_OF_CHANGE.indexOf(what))
        expect(order).toEqual([...new Set(order)].sort((a, b) => a - b))
      }),
      { numRuns: 40, seed: 8 },
    )
  })
})
