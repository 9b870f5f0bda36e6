import { describe, expect, it } from 'vitest'
import { lastYearFactor, seenFactor } from '#shared/demand/seen-factor.ts'

const use = (quantity: number, exposureDays = 7) => ({ quantity, exposureDays })

describe('the factor seen', () => {
  it('is the entered one until something was counted', () => {
    expect(seenFactor({ entered: 2, bins: [{ basePerDay: 3, inside: [] }] })).toEqual({
      seen: null,
      intervals: 0,
      used: 2,
    })
    expect(seenFactor({ entered: 2, bins: [{ basePerDay: 0, inside: [use(4)] }] })).toMatchObject({
      seen: null,
      used: 2,
    })
  })

  it('pools the bins of the scope and meets the entered one half-way, on the scale of factors, after four intervals', () => {
    const bins = [
      { basePerDay: 2, inside: [use(25), use(24)] },
      { basePerDay: 1, inside: [use(10), use(12)] },
    ]
    // 71 used where 14 × 2 + 14 × 1 = 42 would have been.
    const found = seenFactor({ entered: 2, bins })
    expect(found.seen).toBeCloseTo(71 / 42, 12)
    expect(found.used).toBeCloseTo(Math.sqrt(2 * (71 / 42)), 12)
  })

  it('lies nearer to what was seen with every interval', () => {
    const used = (n: number): number =>
      seenFactor({ entered: 2, bins: [{ basePerDay: 1, inside: Array.from({ length: n }, () => use(7)) }] }).used
    expect(used(1)).toBeCloseTo(2 ** 0.8, 12)
    expect(used(12)).toBeCloseTo(2 ** 0.25, 12)
    expect(used(400)).toBeLessThan(1.01)
  })

  it('keeps a closure closed and never falls to 0 by chance', () => {
    expect(seenFactor({ entered: 0, bins: [{ basePerDay: 2, inside: [use(3)] }] }).used).toBe(0)
    const quiet = seenFactor({ entered: 0.5, bins: [{ basePerDay: 2, inside: [use(0)] }] })
    expect(quiet.seen).toBeCloseTo(0.5 / 14, 12)
    expect(quiet.used).toBeGreaterThan(0)
  })
})

describe('the factor of a year ago', () => {
  const weeks = (...quantities: number[]) => quantities.map((quantity) => use(quantity))

  it('is use a day in the same stretch over that before it', () => {
    expect(lastYearFactor({ inside: weeks(10, 12, 8, 12), before: weeks(20, 22, 20, 22) })).toBeCloseTo(0.5, 12)
    expect(lastYearFactor({ inside: weeks(0, -1, 0, 0), before: weeks(5, 5, 5, 5) })).toBe(0)
  })

  it('is nothing from fewer than four intervals on either side, or where nothing was used', () => {
    expect(lastYearFactor({ inside: weeks(1, 2, 3), before: weeks(1, 2, 3, 4) })).toBeNull()
    expect(lastYearFactor({ inside: weeks(1, 2, 3, 4), before: weeks(1, 2, 3) })).toBeNull()
    expect(lastYearFactor({ inside: weeks(1, 2, 3, 4), before: weeks(0, 0, 0, 0) })).toBeNull()
  })
})
