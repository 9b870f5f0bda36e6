import { describe, expect, it } from 'vitest'
import { unusualCount, usualRange, type CountSituation } from '#shared/counts/unusual-count.ts'

const line = { orderLineId: '7', orderNumber: 'T-0031', units: 50, expectedOn: '2026-12-03' }
const place = (quantity: number, more: Partial<CountSituation> = {}): CountSituation => ({
  quantity,
  last: { quantity: 14, daysAgo: 2 },
  recordedSince: 0,
  meanPerDay: 2,
  variancePerDay: 3,
  capacity: 200,
  packSize: 25,
  openLines: [],
  ...more,
})

describe('usualRange', () => {
  it('holds the last count less a quantile of the use on each side', () => {
    // Use over 2 days: mean 4, variance 6, so negative binomial with size 8 and q = 2/3; CDF(13) = 0.9975…, CDF(0) = 0.039.
    expect(usualRange(place(12))).toEqual({ from: 1, to: 14 })
    expect(usualRange(place(12, { recordedSince: 50 }))).toEqual({ from: 51, to: 64 })
  })

  it('is unknown without a count or an estimate of use', () => {
    expect(usualRange(place(12, { last: null }))).toBeNull()
    expect(usualRange(place(12, { meanPerDay: null }))).toBeNull()
  })

  it('is a single number where nothing is used or no time has passed', () => {
    expect(usualRange(place(12, { meanPerDay: 0, variancePerDay: 0 }))).toEqual({ from: 14, to: 14 })
    expect(usualRange(place(12, { last: { quantity: 14, daysAgo: 0 } }))).toEqual({ from: 14, to: 14 })
  })
})

describe('unusualCount', () => {
  it.each([14, 12, 3, 1])('asks nothing about %i', (n) => {
    expect(unusualCount(place(n))).toBeNull()
  })

  it('offers the number without the extra zero', () => {
    expect(unusualCount(place(120))).toMatchObject({ kind: 'tenfold', keep: 120, instead: 12 })
  })

  it('offers the number with the missing zero', () => {
    const full = place(12, { last: { quantity: 124, daysAgo: 1 } })
    expect(unusualCount(full)).toMatchObject({ kind: 'tenfold', keep: 12, instead: 120 })
  })

  it('sees a slip by ten where the use is not known yet', () => {
    const unknown = { meanPerDay: null, variancePerDay: null }
    expect(unusualCount(place(140, unknown))).toMatchObject({ kind: 'tenfold', instead: 14 })
    expect(unusualCount(place(10, unknown))).toBeNull()
  })

  it('asks about the first zero only', () => {
    expect(unusualCount(place(0))).toEqual({ kind: 'first-zero', keep: 0 })
    expect(unusualCount(place(0, { last: null }))).toEqual({ kind: 'first-zero', keep: 0 })
    expect(unusualCount(place(0, { last: { quantity: 0, daysAgo: 3 } }))).toBeNull()
  })

  it('asks about more than the shelf holds', () => {
    expect(unusualCount(place(33, { capacity: 30, last: null }))).toMatchObject({
      kind: 'over-capacity',
      keep: 33,
      capacity: 30,
    })
    expect(unusualCount(place(30, { capacity: 30 }))).toBeNull()
  })

  it('asks about a rise by more than a pack, with what is still open of each order line', () => {
    expect(unusualCount(place(39))).toBeNull()
    expect(unusualCount(place(64, { openLines: [line, { ...line, orderLineId: '8', units: 0 }] }))).toMatchObject({
      kind: 'rise',
      keep: 64,
      expected: 14,
      rise: 50,
      lines: [{ orderLineId: '7', units: 50 }],
    })
    expect(unusualCount(place(64, { recordedSince: 50 }))).toBeNull()
  })

  it('lets an open order explain a rise past what the shelf holds', () => {
    expect(unusualCount(place(64, { capacity: 60, openLines: [line] }))?.kind).toBe('rise')
    expect(unusualCount(place(64, { capacity: 60 }))?.kind).toBe('over-capacity')
  })

  it('asks about a number far below the usual', () => {
    const steady = place(30, { last: { quantity: 61, daysAgo: 2 } })
    expect(unusualCount(steady)).toMatchObject({ kind: 'outside-usual', keep: 30 })
  })
})
