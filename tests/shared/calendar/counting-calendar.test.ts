import { describe, expect, it } from 'vitest'
import { nextCountAt, type CountingCalendar } from '#shared/calendar/counting-calendar.ts'

const zone = 'Europe/London'
const ms = (text: string): number => Date.parse(text)
const shown = (at: number): string => new Date(at).toISOString().slice(0, 16)
const counting = (weekdays: number[], ...closed: string[]): CountingCalendar => ({
  zone,
  weekdays,
  closed: new Set(closed),
})

describe('nextCountAt', () => {
  it('is count and rhythm where every day counts', () => {
    const counted = ms('2026-11-06T09:30:00Z')
    expect(nextCountAt(null, counted, 1.5)).toBe(counted + 1.5 * 86_400_000)
    expect(nextCountAt(counting([]), counted, 1.5)).toBe(counted + 1.5 * 86_400_000)
  })

  it('moves on to the next weekday that counts and is not closed, at the same wall time', () => {
    const friday = ms('2026-11-06T09:30:00Z')
    expect(shown(nextCountAt(counting([1, 3, 5]), friday, 1))).toBe('2026-11-09T09:30')
    expect(shown(nextCountAt(counting([1, 3, 5], '2026-11-09'), friday, 1))).toBe('2026-11-11T09:30')
    // The clocks go forward on Sunday 28 March 2027: 09:30 stays 09:30.
    expect(shown(nextCountAt(counting([1]), ms('2027-03-26T09:30:00Z'), 1))).toBe('2027-03-29T08:30')
  })

  it('goes by the local date, not by that of Greenwich', () => {
    // 23:30 UTC on Sunday 7 June is Monday 00:30 in London.
    expect(shown(nextCountAt(counting([1]), ms('2026-06-06T23:30:00Z'), 1))).toBe('2026-06-07T23:30')
  })

  it('says what to do when the room never counts', () => {
    expect(() => nextCountAt(counting([8]), 0, 1)).toThrow(/open a weekday/)
  })
})
