import { describe, expect, it } from 'vitest'
import { countRhythm } from '#shared/demand/count-rhythm.ts'
import { forget, halfLifeDays } from '#shared/demand/forget.ts'
import type { DemandInterval } from '#shared/demand/demand-events.ts'
import { mergeNegatives } from '#shared/demand/merge-negatives.ts'
import { asPolicyIntervals, wastageRate } from '#shared/demand/policy-intervals.ts'
import { weeks as chain } from './weeks.ts'

const policyIntervals = (intervals: readonly DemandInterval[]) => asPolicyIntervals(mergeNegatives(intervals).intervals)

describe('negative use', () => {
  it('is merged with the neighbour that holds the other half of the miscount', () => {
    const got = policyIntervals(chain([10, 11, -4, 24, 10]))
    expect(got.map(({ quantity, days }) => [quantity, days])).toEqual([
      [10, 7],
      [11, 7],
      [20, 14],
      [10, 7],
    ])
    expect(policyIntervals(chain([10, 24, -4, 11, 10])).map(({ quantity }) => quantity)).toEqual([10, 20, 11, 10])
  })

  it('keeps the total: nothing is clipped at 0', () => {
    const uses = [3, -9, 2, 1, -2, 30, 4]
    const total = policyIntervals(chain(uses)).reduce((sum, { quantity }) => sum + quantity, 0)
    expect(total).toBe(uses.reduce((sum, use) => sum + use, 0))
  })

  it('stays as it is when no neighbour shares a count with it', () => {
    const left = { 1: { used: false, why: 'rise-unexplained' as const } }
    const got = policyIntervals(chain([10, -60, -3], left))
    expect(got.map(({ quantity, weight }) => [quantity, weight])).toEqual([
      [10, 1],
      [-60, 0],
      [-3, 1],
    ])
  })

  it('of a single interval is kept', () => {
    expect(policyIntervals(chain([-3])).map(({ quantity }) => quantity)).toEqual([-3])
  })

  it('carries an empty ending over', () => {
    expect(policyIntervals(chain([10, -2, 9], { 2: { censored: true } }))).toMatchObject([
      { quantity: 8 },
      { quantity: 9, censored: true },
    ])
    expect(policyIntervals(chain([1, -2, 9], { 2: { censored: true } }))).toMatchObject([
      { quantity: 1 },
      { quantity: 7, censored: true, days: 14 },
    ])
  })
})

describe('what is left out', () => {
  it('goes along with weight 0, but not for mere age or from before the history start', () => {
    const got = policyIntervals(
      chain([4, 5, 6, 7, 8], {
        0: { used: false, why: 'too-old' },
        1: { used: false, why: 'before-start' },
        3: { used: false, why: 'was-empty' },
      }),
    )
    expect(got.map(({ quantity, weight }) => [quantity, weight])).toEqual([
      [6, 1],
      [7, 0],
      [8, 1],
    ])
  })

  it('leaves nothing when no interval may be used', () => {
    expect(policyIntervals(chain([5], { 0: { used: false, why: 'was-empty' } }))).toEqual([])
  })
})

describe('forgetting', () => {
  it('halves the weight every 120 days, counted from the newest close', () => {
    expect(halfLifeDays).toBe(120)
    const got = forget(
      chain(
        Array.from({ length: 9 }, () => 10),
        {},
        30,
      ),
    )
    expect(got.at(-1)!.weight).toBe(1)
    expect(got.at(-5)!.weight).toBeCloseTo(0.5, 12)
    expect(got[0]!.weight).toBeCloseTo(0.25, 12)
  })

  it('forgets nothing while that would leave fewer than five effective intervals', () => {
    for (const { weight } of forget(chain([5, 5, 5, 5, 5], {}, 30))) expect(weight).toBe(1)
    for (const { weight } of forget(chain([5, 5, 5, 5, 5, 5], {}, 200))) expect(weight).toBe(1)
    expect(forget(chain([5, 5, 5, 5, 5, 5], {}, 30))[0]!.weight).toBeLessThan(1)
  })

  it('counts age from the newest interval that is used', () => {
    const uses = Array.from({ length: 9 }, () => 10)
    const got = forget(chain(uses, { 8: { used: false, why: 'was-empty' } }, 30))
    expect(got[7]!.weight).toBe(1)
  })
})

describe('wastage', () => {
  it('counts from 2 % of use on, per calendar day', () => {
    expect(wastageRate(chain([50, 50], { 0: { wastage: 7 } }))).toBe(0.5)
    expect(wastageRate(chain([50, 50], { 0: { wastage: 2 } }))).toBe(0)
    expect(wastageRate([])).toBe(0)
  })
})

describe('the rhythm of counting', () => {
  it('is the plan while counts keep to it', () => {
    expect(countRhythm([], 3)).toBe(3)
    expect(countRhythm([2, 3, 3, 2, 3], 3)).toBe(3)
  })
  it('is the 80th percentile of the last twelve gaps when they are longer', () => {
    // Ten gaps: the eighth smallest is 7.
    expect(countRhythm([1, 1, 2, 2, 3, 4, 5, 7, 8, 30], 3)).toBe(7)
    expect(countRhythm([...Array.from({ length: 20 }, () => 40), ...Array.from({ length: 12 }, () => 2)], 1)).toBe(2)
  })
})
