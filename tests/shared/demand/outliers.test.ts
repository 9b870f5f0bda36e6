import { describe, expect, it } from 'vitest'
import type { DemandInterval } from '#shared/demand/demand-events.ts'
import { learnDemand } from '#shared/demand/learn-demand.ts'
import { outliers } from '#shared/demand/outliers.ts'
import { fold } from '#shared/ledger/fold.ts'
import { weeks } from './weeks.ts'

const found = (uses: number[], changes: Record<number, Partial<DemandInterval>> = {}) =>
  outliers(weeks(uses, changes)).map(({ quantity }) => quantity)

describe('outliers', () => {
  it('lie more than four deviations from what the others say', () => {
    const [one, ...more] = outliers(weeks([14, 14, 14, 14, 40]))
    expect(more).toEqual([])
    // The others use 2 a day without spread, so w counts as 1: (40 − 14) ÷ √14.
    expect(one).toMatchObject({ closingOpId: 'c5', quantity: 40 })
    expect(one!.expected).toBeCloseTo(14, 12)
    expect(one!.residual).toBeCloseTo(26 / Math.sqrt(14), 12)
  })

  it('are held against the spread of the others', () => {
    // Others 4, 24, 6, 22: 2 a day, s² = ((16 + 576 + 36 + 484) ÷ 7 − 56² ÷ 28) ÷ 3, w = s² ÷ 2.
    const w = ((16 + 576 + 36 + 484) / 7 - 112) / 3 / 2
    const edge = 14 + 4 * Math.sqrt(w * 14)
    expect(found([4, 24, 6, 22, Math.floor(edge)])).toEqual([])
    expect(found([4, 24, 6, 22, Math.ceil(edge)])).toEqual([Math.ceil(edge)])
  })

  it('may lie below, but not when the shelf was empty', () => {
    expect(found([70, 71, 69, 70, 20])).toEqual([20])
    expect(found([70, 71, 69, 70, 20], { 4: { censored: true } })).toEqual([])
  })

  it('compare with something where the others show no use: a first unit is no reason to ask', () => {
    expect(found([0, 0, 0, 1])).toEqual([])
    // Half a unit in three weeks: 1/6 expected.
    expect(outliers(weeks([0, 0, 0, 6]))[0]!.expected).toBeCloseTo(1 / 6, 12)
  })

  it('are asked about from four intervals on, among those that are used', () => {
    expect(found([14, 14, 80])).toEqual([])
    expect(found([14, 14, 14, 80])).toEqual([80])
    expect(found([14, 14, 14, 80], { 0: { used: false, why: 'excluded' } })).toEqual([])
  })

  it('are named with what a place teaches and stay in use; a miscount its neighbour takes back is none', () => {
    const learn = (found: number[]) =>
      learnDemand(
        fold(
          found.map((quantity, i) => ({
            opId: `op-${i}`,
            part: 0,
            type: 'count',
            quantity,
            effectiveAt: i * 7 * 86_400_000,
            statedAt: i * 7 * 86_400_000,
            deviceId: 'd',
            localSeq: i,
            targetOpId: null,
            flags: [],
          })),
        ).rows,
        { packSize: 100, plannedRhythmDays: 7 },
      )
    const typed = learn([200, 190, 180, 170, 110, 100, 90])
    expect(typed.outliers).toMatchObject([{ closingOpId: 'op-4', quantity: 60 }])
    expect(typed.forPolicy.map(({ quantity }) => quantity)).toContain(60)
    expect(learn([200, 190, 180, 170, 220, 150, 140]).outliers).toEqual([])
  })
})
