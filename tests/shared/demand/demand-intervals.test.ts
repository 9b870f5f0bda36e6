import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DemandEvent, DemandInterval } from '#shared/demand/demand-events.ts'
import { demandIntervals } from '#shared/demand/demand-intervals.ts'

const HOUR = 3_600_000
const DAY = 24 * HOUR

/** Events written as [days since the start, type, quantity]; ids follow the position. */
const ledger = (...rows: [number, string, number][]): DemandEvent[] =>
  rows.map(([at, type, quantity], i) => ({ opId: `op-${i}`, type, quantity, effectiveAt: Math.round(at * DAY) }))

const intervalsOf = (...rows: [number, string, number][]): DemandInterval[] =>
  demandIntervals(ledger(...rows), { packSize: 10 })

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

describe('age', () => {
  it('over two years leaves an interval out', () => {
    const got = intervalsOf([0, 'count', 30], [7, 'count', 20], [700, 'count', 10], [740, 'count', 5])
    expect(got.map(({ why }) => why)).toEqual(['too-old', null, null])
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
