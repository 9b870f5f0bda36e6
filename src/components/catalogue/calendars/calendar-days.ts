import type { CalendarDay } from '#shared/contracts/calendars.ts'

export interface CalendarYear {
  year: number
  days: CalendarDay[]
}

const yearOf = (day: CalendarDay): number => Number(day.date.slice(0, 4))
const byDate = (a: CalendarDay, b: CalendarDay): number => a.date.localeCompare(b.date)

/** Days of a calendar in one year. */
export const daysIn = (days: readonly CalendarDay[], year: number): number =>
  days.filter((day) => yearOf(day) === year).length

/**
 * Days by year and date, in two parts: years that are over, and the present and later ones. The present year and the
 * next stand there even when they are empty, because that has to be seen.
 */
export function calendarYears(
  days: readonly CalendarDay[],
  thisYear: number,
): { earlier: CalendarYear[]; present: CalendarYear[] } {
  const years = [...new Set([...days.map(yearOf), thisYear, thisYear + 1])].sort((a, b) => a - b)
  const all = years.map((year) => ({ year, days: days.filter((day) => yearOf(day) === year).sort(byDate) }))
  return { earlier: all.filter(({ year }) => year < thisYear), present: all.filter(({ year }) => year >= thisYear) }
}

/** The day that stands on a date already, if any. */
export const dayOn = (days: readonly CalendarDay[], date: string): CalendarDay | null =>
  days.find((day) => day.date === date) ?? null

export const withDay = (days: readonly CalendarDay[], day: CalendarDay): CalendarDay[] =>
  [...days.filter((one) => one.date !== day.date), day].sort(byDate)

export const withoutDay = (days: readonly CalendarDay[], date: string): CalendarDay[] =>
  days.filter((day) => day.date !== date)
