import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { demandClass, demandShape } from '#shared/demand/demand-class.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

const periods = (...uses: number[]) => uses.map((quantity) => ({ exposureDays: 7, quantity }))

describe('the class of a demand', () => {
  it('follows the two figures of the source', () => {
    // 8 periods, 4 with demand 2, 4, 4, 6: mean 4, variance (4 + 0 + 0 + 4) ÷ 3.
    const shape = demandShape(periods(2, 0, 4, 0, 4, 0, 6, 0))
    expect(shape!.adi).toBe(2)
    expect(shape!.cv2).toBeCloseTo(8 / 3 / 16, 12)
    expect(demandClass(periods(2, 0, 4, 0, 4, 0, 6, 0))).toBe('intermittent')
    // 1, 1, 1, 13: mean 4, variance 108 ÷ 3 = 36, squared variation 2.25.
    expect(demandClass(periods(1, 0, 1, 0, 1, 0, 13, 0))).toBe('lumpy')
    expect(demandClass(periods(1, 1, 1, 13))).toBe('erratic')
    expect(demandClass(periods(2, 4, 4, 6))).toBe('smooth')
  })

  it('changes above 1.32, not at it', () => {
    const uses = (periodsWithout: number): number[] => [
      ...Array.from({ length: 25 }, () => 3),
      ...Array.from({ length: periodsWithout }, () => 0),
    ]
    expect(demandClass(periods(...uses(8)))).toBe('smooth') // 33 ÷ 25
    expect(demandClass(periods(...uses(9)))).toBe('intermittent')
  })

  it('does not hold a longer interval for a larger demand', () => {
    const uneven = [
      { exposureDays: 2, quantity: 2 },
      { exposureDays: 20, quantity: 20 },
      { exposureDays: 5, quantity: 5 },
    ]
    expect(demandShape(uneven)).toEqual({ adi: 1, cv2: 0 })
  })

  it('is undefined with fewer than two periods with use', () => {
    expect(demandClass(periods(0, 0, 5, 0, -1))).toBeNull()
    expect(demandClass([])).toBeNull()
  })

  it('is lumpy exactly where a policy warns of it', () => {
    const interval = fc.record({ days: fc.integer({ min: 1, max: 20 }), quantity: fc.integer({ min: -2, max: 9 }) })
    fc.assert(
      fc.property(fc.array(interval, { minLength: 1, maxLength: 10 }), (rows) => {
        const intervals = rows.map((row) => ({ ...row, exposureDays: row.days }))
        const { warnings } = reorderPoint({ intervals, leadTime: { meanDays: 3 }, serviceLevel: 0.98 })
        expect(demandClass(intervals) === 'lumpy').toBe(warnings.includes('lumpy'))
      }),
    )
  })
})
