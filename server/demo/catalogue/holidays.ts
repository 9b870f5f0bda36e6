import { DateTime } from 'luxon'
import type { CalendarDay } from '#shared/contracts/calendars.ts'

export const calendarName = 'Tallowmere holidays'

const monday = 1

/** Fixed days; one that falls on a weekend is kept on the next working day that is free as well. */
const fixed = [
  { month: 1, day: 1, name: 'New Year’s Day' },
  { month: 12, day: 25, name: 'Christmas Day' },
  { month: 12, day: 26, name: 'Day after Christmas' },
]

/** The holidays of the hospital's region in one year, by date. */
export function holidaysOf(year: number): CalendarDay[] {
  const days = new Map<string, string>()
  const add = (day: DateTime, name: string): unknown => days.set(day.toISODate() ?? '', name)
  for (const { month, day, name } of fixed) add(DateTime.utc(year, month, day), name)
  add(firstMonday(year, 5), 'Early May Monday')
  add(lastMonday(year, 5), 'Late May Monday')
  add(lastMonday(year, 8), 'August Monday')
  for (const { month, day, name } of fixed) {
    const own = DateTime.utc(year, month, day)
    if (own.weekday > 5) add(nextFree(own, days), `In place of ${name}`)
  }
  return [...days].map(([date, name]) => ({ date, name })).sort((a, b) => a.date.localeCompare(b.date))
}

const firstMonday = (year: number, month: number): DateTime => {
  const first = DateTime.utc(year, month, 1)
  return first.plus({ days: (monday - first.weekday + 7) % 7 })
}

const lastMonday = (year: number, month: number): DateTime => {
  const last = DateTime.utc(year, month, 1).endOf('month').startOf('day')
  return last.minus({ days: last.weekday - monday })
}

function nextFree(from: DateTime, taken: ReadonlyMap<string, string>): DateTime {
  let day = from.plus({ days: 1 })
  while (day.weekday > 5 || taken.has(day.toISODate() ?? '')) day = day.plus({ days: 1 })
  return day
}

/** Of every year from one to another. */
export const holidaysBetween = (from: number, to: number): CalendarDay[] =>
  Array.from({ length: to - from + 1 }, (_, i) => holidaysOf(from + i)).flat()
