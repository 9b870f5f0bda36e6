import { DateTime } from 'luxon'

const hourMs = 3_600_000
export const dayMs = 24 * hourMs

/** One local day of the hospital. */
export interface Day {
  /** YYYY-MM-DD. */
  date: string
  /** 1 Monday … 7 Sunday. */
  weekday: number
  /** Days since 1 January 2020: the same number for the same day in every run. */
  ordinal: number
  /** Epoch ms of the wall clock's 00:00 as it runs in daytime; clocks change at night, so use it from 05:00 on. */
  base: number
}

const origin = DateTime.fromISO('2020-01-01', { zone: 'utc' })

/** The local days that touch the span from `from` to `to` (epoch ms), oldest first. */
export function daysBetween(from: number, to: number, zone: string): Day[] {
  const days: Day[] = []
  const last = DateTime.fromMillis(to, { zone }).startOf('day')
  for (let day = DateTime.fromMillis(from, { zone }).startOf('day'); day <= last; day = day.plus({ days: 1 })) {
    const noon = day.set({ hour: 12 })
    const date = day.toISODate() ?? ''
    days.push({
      date,
      weekday: day.weekday,
      ordinal: Math.round(DateTime.fromISO(date, { zone: 'utc' }).diff(origin, 'days').days),
      base: noon.toMillis() - 12 * hourMs,
    })
  }
  return days
}

/** The moment at which the wall clock shows that hour; from 5 on. Decimal hours: 9.5 is half past nine. */
export const atHour = (day: Pick<Day, 'base'>, hour: number): number => Math.round(day.base + hour * hourMs)

/** The hospital's own date at a moment. */
export const localDate = (ms: number, zone: string): string => DateTime.fromMillis(ms, { zone }).toISODate() ?? ''

/** The last moment at or before `ms` at which a coordinator is at work: Monday to Friday, 08:00 to 16:30. */
export function lastOfficeMoment(ms: number, zone: string): number {
  const at = DateTime.fromMillis(ms, { zone })
  for (let back = 0; back <= 7; back += 1) {
    const day = at.minus({ days: back }).startOf('day')
    if (day.weekday > 5) continue
    const opens = day.set({ hour: 8 }).toMillis()
    const closes = day.set({ hour: 16, minute: 30 }).toMillis()
    if (ms >= opens) return Math.min(ms, closes)
  }
  throw new RangeError('no working day within a week')
}
