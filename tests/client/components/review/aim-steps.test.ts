import { describe, expect, it } from 'vitest'
import { priceOfLevels } from '#shared/policy/price-of-level.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { levelSteps } from '#shared/policy/service-level-steps.ts'
import { aimSteps } from '#src/components/review/aim-steps.ts'
import { reviewDays } from '#src/components/review/review-days.ts'
import { aimWords } from '#src/i18n/en.ts'

const input = {
  demand: { meanPerDay: 6, variancePerDay: 11 },
  leadTime: { meanDays: 2 },
  reviewPeriodDays: 1,
  serviceLevel: 0.98,
  order: { packSize: 5 },
  capacity: 100,
}

describe('aims', () => {
  it('offers the usual steps inside floor and ceiling, with the present aim among them', () => {
    expect(levelSteps(0.95, 0.995, 0.985)).toEqual([0.95, 0.975, 0.98, 0.985, 0.99, 0.995])
    expect(levelSteps(0.9, 0.999, 0.98).filter((level) => level === 0.98)).toHaveLength(1)
  })

  it('works each step out exactly as the policy would, with the difference to now', () => {
    const steps = aimSteps(priceOfLevels, input, [0.95, 0.98, 0.999], { level: 0.98, reorderPoint: 25 })
    for (const step of steps) {
      const direct = reorderPoint({ ...input, serviceLevel: step.level })
      expect(step.reorderPoint).toBe(direct.reorderPoint)
      expect(step.cycleService).toBeCloseTo(direct.achieved!, 12)
      expect(step.units).toBe(step.reorderPoint - 25)
    }
    expect(steps.map((s) => s.now)).toEqual([false, true, false])
    expect(steps[0]!.reorderPoint).toBeLessThan(steps[2]!.reorderPoint)
  })

  it('says when the shelf cuts a step', () => {
    const [high] = aimSteps(priceOfLevels, { ...input, capacity: 20 }, [0.999], { level: 0.98, reorderPoint: 15 })
    expect(high).toMatchObject({ cut: true, reorderPoint: 15 })
  })

  it('names money only where a price is known, and the limits of few data', () => {
    const present = { level: 0.98, reorderPoint: 25 }
    const [free] = aimSteps(priceOfLevels, input, [0.99], present)
    expect(aimWords.held(free!.meanStock, free!.holdingPerYear, 'GBP')).toMatch(/^\d+ kept$/)
    const priced = { ...input, order: { packSize: 5, unitCost: 3, holdingRatePerYear: 0.2 } }
    const [step] = aimSteps(priceOfLevels, priced, [0.99], present)
    expect(aimWords.held(step!.meanStock, step!.holdingPerYear, 'GBP')).toMatch(/^\d+ kept, £\d+(\.\d+)? a year$/)
    const rare = { ...step!, yearsBetweenRunOuts: 8 }
    expect(aimWords.limits(rare, null)).toHaveLength(1)
    expect(aimWords.limits({ ...rare, yearsBetweenRunOuts: 0.2 }, null)).toHaveLength(0)
  })
})

describe('reviewDays', () => {
  it('lies after today and at most two years on', () => {
    expect(reviewDays('2026-05-14')).toEqual({ first: '2026-05-15', last: '2028-05-14', usual: '2026-08-14' })
  })
})
