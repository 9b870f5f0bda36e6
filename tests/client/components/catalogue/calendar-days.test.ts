import { describe, expect, it } from 'vitest'
import { calendarYears, dayOn, daysIn, withDay, withoutDay } from '#src/components/catalogue/calendars/calendar-days.ts'
import { calendarWords } from '#src/i18n/en.ts'

const christmas = { date: '2026-12-25', name: 'Christmas Day' }
const newYear = { date: '2026-01-01', name: 'New Year’s Day' }
const days = [christmas, newYear, { date: '2024-12-25', name: 'Christmas Day' }]

describe('the days of a calendar', () => {
  it('stand by year and date; this year and the next are there even when they are empty', () => {
    const { earlier, present } = calendarYears(days, 2026)
    expect(earlier.map(({ year }) => year)).toEqual([2024])
    expect(present.map(({ year, days: inYear }) => [year, inYear.length])).toEqual([
      [2026, 2],
      [2027, 0],
    ])
    expect(present[0]?.days).toEqual([newYear, christmas])
    expect(daysIn(days, 2025)).toBe(0)
  })

  it('hold a date once, and lose it again', () => {
    expect(dayOn(days, '2026-12-25')).toEqual(christmas)
    expect(dayOn(days, '2026-12-26')).toBeNull()
    const renamed = withDay(days, { date: '2026-12-25', name: 'Stores closed' })
    expect(renamed.filter((day) => day.date === '2026-12-25')).toEqual([{ date: '2026-12-25', name: 'Stores closed' }])
    expect(withoutDay(days, '2026-12-25')).toHaveLength(2)
  })

  it('say who goes by them, and how deliveries came', () => {
    expect(calendarWords.usedBy({ isHospital: true, suppliers: 2, wards: 1 })).toBe('the hospital, 2 suppliers, 1 ward')
    expect(calendarWords.usedBy({ isHospital: false, suppliers: 0, wards: 0 })).toBe('nobody yet')
    const seen = (deliveries: number, delayDays: number | null) =>
      calendarWords.deliveriesSeen({ deliveries, delayDays })
    expect(seen(31, 0.42)).toBe('31 deliveries seen, half a day late on average.')
    expect(seen(1, -1.1)).toBe('1 delivery seen, 1 day early on average.')
    expect(seen(8, 0.2)).toBe('8 deliveries seen, on time on average.')
    expect(seen(0, null)).toMatch(/^No deliveries seen/)
  })
})
