import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { exposureOf, usualActivity, type ActivityChange } from '#shared/demand/activity.ts'
import type { DemandEvent, DemandInterval } from '#shared/demand/demand-events.ts'
import { demandIntervals, type IntervalOptions } from '#shared/demand/demand-intervals.ts'

const HOUR = 3_600_000
const DAY = 24 * HOUR

/** Events written as [days since the start, type, quantity]; ids follow the position. */
const ledger = (...rows: [number, string, number][]): DemandEvent[] =>
  rows.map(([at, type, quantity], i) => ({ opId: `op-${i}`, type, quantity, effectiveAt: Math.round(at * DAY) }))

const intervalsOf = (...rows: [number, string, number][]): DemandInterval[] =>
  demandIntervals(ledger(...rows), { packSize: 10 })

const cut = (options: Partial<IntervalOptions>, ...rows: [number, string, number][]): DemandInterval[] =>
  demandIntervals(ledger(...rows), { packSize: 10, ...options })

describe('the identity of use', () => {
  it('adds what came and takes off what went, by every kind of movement', () => {
    const [interval] = intervalsOf(
      [0, 'count', 30],
      [1, 'receipt', 40],
      [2, 'transfer-in', 6],
      [3, 'transfer-out', -4],
      [4, 'wastage', -3],
      [5, 'hold', -8],
      [6, 'release', 5],
      [6.5, 'adjust', -2],
      [7, 'count', 21],
    )
    // 30 + 40 + 6 − 4 − 3 − 8 + 5 − 2 − 21 = 43
    expect(interval).toMatchObject({ quantity: 43, days: 7, exposureDays: 7, censored: false, used: true, wastage: 3 })
    expect(interval).toMatchObject({ openingOpId: 'op-0', closingOpId: 'op-8' })
  })

  it('holds takes to be use: they are inside and never subtracted', () => {
    const without = intervalsOf([0, 'count', 30], [7, 'count', 20])[0]
    const withTakes = intervalsOf([0, 'count', 30], [2, 'take', -4], [5, 'take', -3], [7, 'count', 20])[0]
    expect(withTakes!.quantity).toBe(10)
    expect(withTakes!.quantity).toBe(without!.quantity)
  })

  it('gives each pair of neighbouring counts one interval', () => {
    const got = intervalsOf([0, 'count', 30], [3, 'count', 26], [7, 'receipt', 20], [10, 'count', 31])
    expect(got.map(({ quantity, days }) => [quantity, days])).toEqual([
      [4, 3],
      [15, 7],
    ])
  })

  it('has nothing to say before the second count', () => {
    expect(intervalsOf()).toEqual([])
    expect(intervalsOf([0, 'receipt', 10], [1, 'count', 8], [2, 'take', -3])).toEqual([])
  })
})

describe('counts within twelve hours', () => {
  it('are one count, the later of which closes and opens', () => {
    const got = intervalsOf([0, 'count', 30], [7, 'count', 20], [7 + 0.5 / 24, 'count', 18], [14, 'count', 9])
    expect(got.map(({ quantity, closingOpId }) => [quantity, closingOpId])).toEqual([
      [12, 'op-2'],
      [9, 'op-3'],
    ])
  })

  it('still leave every movement in exactly one interval', () => {
    const got = intervalsOf(
      [0, 'count', 30],
      [7, 'count', 20],
      [7.1, 'receipt', 10],
      [7.2, 'count', 29],
      [14, 'count', 22],
    )
    expect(got.map(({ quantity }) => quantity)).toEqual([11, 7])
  })

  it('do not chain: a count every ten hours still gives intervals', () => {
    const rows = Array.from({ length: 20 }, (_, i): [number, string, number] => [(i * 10) / 24, 'count', 200 - i * 3])
    const got = demandIntervals(ledger(...rows), { packSize: 10 })
    expect(got.length).toBeGreaterThan(4)
    for (const { days } of got) expect(days).toBeGreaterThanOrEqual(0.5)
  })

  it('are two counts from twelve hours on', () => {
    expect(intervalsOf([0, 'count', 30], [0.5, 'count', 28])).toHaveLength(1)
    expect(intervalsOf([0, 'count', 30], [0.499, 'count', 28])).toHaveLength(0)
  })
})

describe('rises', () => {
  it('by more than one pack above the record are unknown, and listed as such', () => {
    const [interval] = intervalsOf([0, 'count', 10], [3, 'take', -2], [7, 'count', 19])
    expect(interval).toMatchObject({ used: false, why: 'rise-unexplained', quantity: -9 })
  })

  it('by one pack or less stay as negative use', () => {
    const [interval] = intervalsOf([0, 'count', 10], [3, 'take', -2], [7, 'count', 18])
    expect(interval).toMatchObject({ used: true, why: null, quantity: -8 })
  })

  it('that a delivery explains are none', () => {
    const [interval] = intervalsOf([0, 'count', 10], [6, 'receipt', 50], [7, 'count', 48])
    expect(interval).toMatchObject({ used: true, quantity: 12 })
  })
})

describe('empty bins', () => {
  it('found empty by a count mean "at least so much"', () => {
    expect(intervalsOf([0, 'count', 10], [7, 'count', 0])[0]).toMatchObject({
      quantity: 10,
      censored: true,
      used: true,
    })
  })

  it('that are only empty by arithmetic do not', () => {
    const got = intervalsOf([0, 'count', 10], [2, 'take', -10], [3, 'receipt', 20], [7, 'count', 15])
    expect(got[0]).toMatchObject({ censored: false, quantity: 15 })
  })

  it('emptied by a hold are no stock-out', () => {
    expect(intervalsOf([0, 'count', 10], [6, 'hold', -7], [7, 'count', 0])[0]).toMatchObject({
      censored: false,
      quantity: 3,
    })
  })

  it('count from the first put-away on', () => {
    const got = intervalsOf([0, 'count', 10], [7, 'count', 0], [9, 'receipt', 40], [14, 'count', 30])
    expect(got[1]).toMatchObject({ days: 7, exposureDays: 5, quantity: 10, used: true })
  })

  it('are left out when nothing was put away', () => {
    const got = intervalsOf([0, 'count', 10], [7, 'count', 0], [14, 'count', 0])
    expect(got[1]).toMatchObject({ used: false, why: 'was-empty', quantity: 0 })
  })

  it('are left out when it was put away just before the count', () => {
    const got = intervalsOf([0, 'count', 10], [7, 'count', 0], [13.9, 'receipt', 40], [14, 'count', 40])
    expect(got[1]).toMatchObject({ used: false, why: 'was-empty' })
  })
})

describe('a history start', () => {
  const weeks: [number, string, number][] = [
    [0, 'count', 40],
    [7, 'count', 30],
    [14, 'count', 20],
    [21, 'count', 10],
  ]

  it('lets counts before it open nothing, the piece across included', () => {
    const got = cut({ historyStart: 10 * DAY }, ...weeks)
    expect(got.map(({ why, used }) => [why, used])).toEqual([
      ['before-start', false],
      ['before-start', false],
      [null, true],
    ])
  })

  it('on the very count lets it open', () => {
    expect(cut({ historyStart: 7 * DAY }, ...weeks).map(({ used }) => used)).toEqual([false, true, true])
    expect(cut({ historyStart: null }, ...weeks).map(({ used }) => used)).toEqual([true, true, true])
  })
})

describe('a change of item', () => {
  it('cuts: each assignment has a ledger of its own, and no interval crosses from one to the other', () => {
    const before = cut({}, [0, 'count', 40], [7, 'count', 30], [9, 'take', -2])
    const after = cut({}, [10, 'count', 100], [17, 'count', 95])
    expect(
      [...before, ...after].map(({ openedAt, closedAt, quantity }) => [openedAt / DAY, closedAt / DAY, quantity]),
    ).toEqual([
      [0, 7, 10],
      [10, 17, 5],
    ])
  })
})

describe('an exclusion', () => {
  const spill = { id: 'x', from: 8 * DAY, to: 9 * DAY }

  it('leaves out what it covers by more than twelve hours', () => {
    const got = cut({ exclusions: [spill] }, [0, 'count', 40], [7, 'count', 30], [14, 'count', 5], [21, 'count', 0])
    expect(got.map(({ why, used }) => [why, used])).toEqual([
      [null, true],
      ['excluded', false],
      [null, true],
    ])
  })

  it('leaves out a short interval it covers by more than half, and none it hardly touches', () => {
    const short = { exclusions: [{ id: 'x', from: 7 * DAY, to: 7.4 * DAY }] }
    expect(cut(short, [7, 'count', 30], [7.6, 'count', 20])[0]).toMatchObject({ used: false, why: 'excluded' })
    expect(cut(short, [7, 'count', 30], [8.2, 'count', 20])[0]).toMatchObject({ used: true })
    // Twelve hours exactly of a week are not more than twelve hours.
    expect(
      cut({ exclusions: [{ id: 'x', from: 6.5 * DAY, to: 9 * DAY }] }, [0, 'count', 9], [7, 'count', 3])[0],
    ).toMatchObject({ used: true })
  })

  it('is not lost when a late count cuts anew', () => {
    const late = cut({ exclusions: [spill] }, [7, 'count', 30], [8.5, 'count', 12], [14, 'count', 5])
    expect(late.map(({ why }) => why)).toEqual(['excluded', 'excluded'])
    const middle = cut(
      { exclusions: [{ ...spill, to: 10 * DAY }] },
      [7, 'count', 30],
      [9, 'count', 12],
      [14, 'count', 5],
    )
    expect(middle.map(({ why }) => why)).toEqual(['excluded', 'excluded'])
  })
})

describe('planned changes', () => {
  const during = (from: number, to: number, more: Partial<ActivityChange>): Partial<IntervalOptions> => ({
    exposure: exposureOf({
      ...usualActivity('utc'),
      changes: [{ id: 'c', from: from * DAY, to: to * DAY, factor: 1, extraPerDay: 0, weekdays: [], ...more }],
    }),
  })

  it('count days by how busy they were, over the stocked part alone', () => {
    const doubled = during(3, 100, { factor: 2 })
    expect(cut(doubled, [0, 'count', 40], [7, 'count', 20])[0]!.exposureDays).toBeCloseTo(3 + 2 * 4, 9)
    const [, second] = cut(doubled, [0, 'count', 9], [7, 'count', 0], [9, 'receipt', 40], [14, 'count', 30])
    expect(second).toMatchObject({ days: 7, stockedFrom: 9 * DAY })
    expect(second!.exposureDays).toBeCloseTo(10, 9)
  })

  it('leave out what lies in a closed time', () => {
    const closed = during(7, 14, { factor: 0 })
    const got = cut(closed, [0, 'count', 40], [7, 'count', 30], [13.8, 'count', 30], [21, 'count', 20])
    expect(got.map(({ why, used }) => [why, used])).toEqual([
      [null, true],
      ['closed', false],
      [null, true],
    ])
    expect(got[2]!.exposureDays).toBeCloseTo(7, 9)
  })

  it('do not take a short quiet stretch for a closed door', () => {
    const exposure = exposureOf({ zone: 'utc', weekday: [1.2, 1.2, 1.2, 1.2, 1.2, 0.5, 0.5], changes: [] })
    // 1 January 1970 was a Thursday: day 2 a Saturday.
    expect(cut({ exposure }, [2.2, 'count', 9], [2.9, 'count', 8])[0]).toMatchObject({ used: true, why: null })
  })

  it('turn extra units into days at the base rate', () => {
    const got = cut(during(7, 14, { extraPerDay: 3 }), [0, 'count', 60], [7, 'count', 46], [14, 'count', 11])
    // 14 and 35 used, 21 of them announced: base (49 − 21 + ½) ÷ 14 a day.
    const base = 28.5 / 14
    expect(got.map(({ exposureDays }) => exposureDays)).toEqual([7, 7 + 21 / base])
    expect(got[1]!.extraUnits).toBeCloseTo(21, 9)
  })

  it('survive an announcement larger than all that was used', () => {
    const [interval] = cut(during(0, 7, { extraPerDay: 30 }), [0, 'count', 60], [7, 'count', 50])
    expect(interval!.exposureDays).toBeCloseTo(7 + 210 / (0.5 / 7), 6)
  })
})

describe('age', () => {
  it('over two years leaves an interval out', () => {
    const got = intervalsOf([0, 'count', 30], [7, 'count', 20], [700, 'count', 10], [740, 'count', 5])
    expect(got.map(({ why }) => why)).toEqual(['too-old', null, null])
    // 730 days exactly are not over it.
    expect(intervalsOf([0, 'count', 30], [7, 'count', 20], [737, 'count', 10])[0]!.used).toBe(true)
  })
})

describe('any ledger', () => {
  const event = fc.record({
    gap: fc.integer({ min: 0, max: 60 }),
    type: fc.constantFrom(
      'count',
      'count',
      'receipt',
      'transfer-in',
      'transfer-out',
      'wastage',
      'take',
      'hold',
      'adjust',
    ),
    amount: fc.integer({ min: 0, max: 30 }),
  })
  const ledgerOf = (rows: { gap: number; type: string; amount: number }[]): DemandEvent[] => {
    let at = 0
    return rows.map(({ gap, type, amount }, i) => {
      at += gap * HOUR
      const goes = ['transfer-out', 'wastage', 'take', 'hold'].includes(type)
      return { opId: `op-${i}`, type, quantity: goes ? -amount : amount, effectiveAt: at }
    })
  }

  it('gives intervals of half a day or more that join without gaps', () => {
    fc.assert(
      fc.property(fc.array(event, { maxLength: 60 }), (rows) => {
        const got = demandIntervals(ledgerOf(rows), { packSize: 10 })
        got.forEach((interval, i) => {
          expect(interval.days).toBeGreaterThanOrEqual(0.5)
          expect(interval.exposureDays).toBeGreaterThan(0)
          expect(interval.exposureDays).toBeLessThanOrEqual(interval.days)
          if (i > 0) expect(interval.openingOpId).toBe(got[i - 1]!.closingOpId)
        })
      }),
    )
  })

  it('loses nothing: uses add up to first count plus what came less what went less last count', () => {
    fc.assert(
      fc.property(fc.array(event, { maxLength: 60 }), (rows) => {
        const events = ledgerOf(rows)
        const got = demandIntervals(events, { packSize: 10 })
        if (got.length === 0) return
        const index = (opId: string) => events.findIndex((candidate) => candidate.opId === opId)
        const [first, last] = [index(got[0]!.openingOpId), index(got.at(-1)!.closingOpId)]
        const moved = events
          .slice(first + 1, last)
          .filter(({ type }) => type !== 'count' && type !== 'take')
          .reduce((sum, { quantity }) => sum + quantity, 0)
        const used = got.reduce((sum, { quantity }) => sum + quantity, 0)
        expect(used).toBe(events[first]!.quantity + moved - events[last]!.quantity)
      }),
    )
  })
})
