import { describe, expect, it } from 'vitest'
import { countsKept } from '#shared/demand/counts-kept.ts'

const dayMs = 86_400_000
const at = (...days: number[]): number[] => days.map((day) => day * dayMs)
const kept = (days: number[], planned: number, asOf: number) => countsKept(at(...days), planned, asOf * dayMs)

describe('countsKept', () => {
  it('counts the last seven planned counts', () => {
    expect(kept([0, 7, 14, 21, 28, 35, 42, 49, 56, 63], 7, 64)).toEqual({ kept: 7, of: 7 })
    expect(kept([0, 7, 14], 7, 15)).toEqual({ kept: 2, of: 2 })
    expect(kept([0], 7, 3)).toEqual({ kept: 0, of: 0 })
    expect(kept([], 7, 3)).toEqual({ kept: 0, of: 0 })
  })

  it('gives half a rhythm of grace, and half a day where counts are daily', () => {
    expect(kept([0, 10.5], 7, 11)).toEqual({ kept: 1, of: 1 })
    // Due on day 7 and missed; day 11 is in time for the one due on day 14.
    expect(kept([0, 11], 7, 11)).toEqual({ kept: 1, of: 2 })
    expect(kept([0, 1.5, 3], 1, 3)).toEqual({ kept: 2, of: 2 })
    expect(kept([0, 0.9, 1.8], 0.5, 1.8)).toEqual({ kept: 2, of: 2 })
  })

  it('counts each one left out, but none that is not overdue yet', () => {
    // Due 7, 14 and 21 while nobody came; day 28 is in time for its own.
    expect(kept([0, 28], 7, 29)).toEqual({ kept: 1, of: 4 })
    expect(kept([0, 7], 7, 14 + 3.5)).toEqual({ kept: 1, of: 1 })
    expect(kept([0, 7], 7, 14 + 3.6)).toEqual({ kept: 1, of: 2 })
    expect(kept([0, 7], 7, 400)).toEqual({ kept: 0, of: 7 })
  })

  it('holds a recount within half a day for the same count', () => {
    expect(kept([0, 0.1, 0.2, 7, 7.3], 7, 8)).toEqual({ kept: 1, of: 1 })
  })

  it('plans on counting days alone', () => {
    // 2 November 2026 was a Monday. Counted Friday, due Saturday: Monday is the next day that counts.
    const counting = { zone: 'utc', weekdays: [1, 2, 3, 4, 5], closed: new Set<string>() }
    const times = ['2026-11-06', '2026-11-09', '2026-11-10'].map((date) => Date.parse(`${date}T09:00:00Z`))
    const asOf = Date.parse('2026-11-10T10:00:00Z')
    expect(countsKept(times, 1, asOf, counting)).toEqual({ kept: 2, of: 2 })
    expect(countsKept(times, 1, asOf)).toEqual({ kept: 2, of: 4 })
  })

  it('refuses a rhythm of nothing', () => {
    expect(() => kept([0], 0, 1)).toThrow(RangeError)
  })
})
