import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { exposureOf, usualActivity } from '#shared/demand/activity.ts'
import { learnDemand } from '#shared/demand/learn-demand.ts'
import { fold } from '#shared/ledger/fold.ts'
import type { LedgerRow } from '#shared/ledger/movement.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

const HOUR = 3_600_000
const DAY = 24 * HOUR

const row = (
  i: number,
  type: string,
  quantity: number,
  effectiveAt: number,
  more: Partial<LedgerRow> = {},
): LedgerRow => ({
  opId: `op-${i}`,
  part: 0,
  type,
  quantity,
  effectiveAt,
  statedAt: effectiveAt,
  deviceId: 'd',
  localSeq: i,
  targetOpId: null,
  flags: [],
  ...more,
})
const options = { packSize: 10, plannedRhythmDays: 3 }
const learn = (rows: LedgerRow[]) => learnDemand(fold(rows).rows, options)

describe('what one assignment teaches', () => {
  it('knows the last count and the rhythm, and leaves out what was taken back', () => {
    const got = learn([
      row(0, 'count', 30, 0),
      row(1, 'count', 99, 3 * DAY),
      row(2, 'withdraw', 0, 4 * DAY, { targetOpId: 'op-1' }),
      row(3, 'count', 20, 7 * DAY),
    ])
    expect(got.intervals.map(({ quantity, days }) => [quantity, days])).toEqual([[10, 7]])
    expect(got.lastCount).toEqual({ at: 7 * DAY, opId: 'op-3' })
    expect(got.rhythmDays).toBe(7)
  })

  it('reads a corrected count at the time of the count it corrects', () => {
    const got = learn([
      row(0, 'count', 30, 0),
      row(1, 'count', 2, 7 * DAY),
      row(2, 'count', 20, 7 * DAY, { targetOpId: 'op-1', statedAt: 9 * DAY }),
    ])
    expect(got.intervals).toMatchObject([{ quantity: 10, days: 7, closingOpId: 'op-2' }])
  })

  it('knows nothing before the first count', () => {
    expect(learn([row(0, 'receipt', 10, 0)])).toMatchObject({
      intervals: [],
      forPolicy: [],
      lastCount: null,
      rhythmDays: 3,
    })
  })

  it('names the intervals that were added to a neighbour across a miscount, and uses them', () => {
    const got = learn([30, 25, 29, 20, 15].map((found, i) => row(i, 'count', found, i * 7 * DAY)))
    expect(got.intervals.map(({ quantity, why, used }) => [quantity, why, used])).toEqual([
      [5, null, true],
      [-4, 'merged', true],
      [9, 'merged', true],
      [5, null, true],
    ])
    expect(got.forPolicy.map(({ quantity, days }) => [quantity, days])).toEqual([
      [5, 7],
      [5, 14],
      [5, 7],
    ])
  })

  it('knows what a usual day uses beside what was announced', () => {
    const change = { id: 'c', from: 7 * DAY, to: 14 * DAY, factor: 1, extraPerDay: 3, weekdays: [] }
    const exposure = exposureOf({ ...usualActivity('utc'), changes: [change] })
    const rows = [row(0, 'count', 60, 0), row(1, 'count', 46, 7 * DAY), row(2, 'count', 11, 14 * DAY)]
    const got = learnDemand(fold(rows).rows, { ...options, exposure })
    expect(got.basePerDay).toBeCloseTo(28.5 / 14, 12)
    // The mean a usual day is what it would have been without the announced units, but for half a unit's rounding.
    const { demand } = reorderPoint({ intervals: got.forPolicy, leadTime: { meanDays: 5 }, serviceLevel: 0.98 })
    expect(demand!.meanPerDay).toBeCloseTo(2, 1)
    expect(learn([row(0, 'count', 9, 0)]).basePerDay).toBeNull()
  })

  it('leaves no trace of what lies before the history start in the policy', () => {
    const rows = [90, 60, 30, 20, 10].map((found, i) => row(i, 'count', found, i * 7 * DAY))
    const got = learnDemand(fold(rows).rows, { ...options, historyStart: 14 * DAY })
    expect(got.forPolicy.map(({ quantity }) => quantity)).toEqual([10, 10])
    expect(got.intervals).toHaveLength(4)
  })

  it('does not let a recount minutes later look like a burst of use', () => {
    const weeks = Array.from({ length: 12 }, (_, i) => row(i, 'count', 500 - 14 * i, i * 7 * DAY))
    const recount = row(20, 'count', 500 - 14 * 6 - 2, 6 * 7 * DAY + HOUR / 3)
    const level = (rows: LedgerRow[]) =>
      reorderPoint({ intervals: learn(rows).forPolicy, leadTime: { meanDays: 5 }, serviceLevel: 0.98 }).reorderPoint!
    expect(Math.abs(level([...weeks, recount]) - level(weeks))).toBeLessThanOrEqual(1)
  })
})

describe('any ledger', () => {
  const event = fc.record({
    gap: fc.integer({ min: 0, max: 200 }),
    type: fc.constantFrom('count', 'count', 'receipt', 'transfer-out', 'wastage', 'take', 'hold', 'release', 'adjust'),
    amount: fc.integer({ min: 0, max: 40 }),
  })
  const ledger = fc.array(event, { maxLength: 50 }).map((events) => {
    let at = 0
    return events.map(({ gap, type, amount }, i) => {
      at += gap * HOUR
      return row(i, type, ['transfer-out', 'wastage', 'take', 'hold'].includes(type) ? -amount : amount, at)
    })
  })

  it('gives an input that can be computed, and says how many intervals were left out', () => {
    fc.assert(
      fc.property(ledger, (rows) => {
        const { intervals, forPolicy, wastagePerDay } = learn(rows)
        const got = reorderPoint({ intervals: forPolicy, wastagePerDay, leadTime: { meanDays: 3 }, serviceLevel: 0.98 })
        expect(got.method === 'entered').toBe(got.reorderPoint === null)
        if (intervals.some(({ used }) => used))
          expect(got.demand!.excludedIntervals).toBe(
            intervals.filter(({ used, why }) => !used && why !== 'too-old').length,
          )
      }),
    )
  })

  it('does not depend on the order in which rows arrive', () => {
    fc.assert(
      fc.property(ledger, (rows) => {
        expect(learn([...rows].reverse())).toEqual(learn(rows))
      }),
    )
  })
})
