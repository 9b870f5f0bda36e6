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

const origin = DateTime.fromISO('2020-01-01', { zone: 'utc' }).toMillis()
const known = new Map<string, Day>()

/** A day by its number; kept, because the same few hundred are asked for all the time. */
function dayOf(ordinal: number, zone: string): Day {
  const key = `${zone}/${ordinal}`
  const kept = known.get(key)
  if (kept) return kept
  const date = DateTime.fromMillis(origin + ordinal * dayMs, { zone: 'utc' }).toISODate() ?? ''
  const noon = DateTime.fromISO(`${date}T12:00`, { zone })
  const day = { date, weekday: noon.weekday, ordinal, base: noon.toMillis() - 12 * hourMs }
  known.set(key, day)
  return day
}

const ordinalOf = (date: string): number =>
  Math.round((DateTime.fromISO(date, { zone: 'utc' }).toMillis() - origin) / dayMs)

/** The local days that touch the span from `from` to `to` (epoch ms), oldest first. */
export function daysBetween(from: number, to: number, zone: string): Day[] {
  const first = ordinalOf(localDate(from, zone))
  const last = ordinalOf(localDate(to, zone))
  return Array.from({ length: last - first + 1 }, (_, i) => dayOf(first + i, zone))
}

/**
 * The moment some working days later, at the same hour of the wall clock; for hours from 5 on.
 *
 * @param closed dates that are no working days, YYYY-MM-DD
 */
export function workingDaysLater(
  ms: number,
  days: number,
  zone: string,
  closed: ReadonlySet<string> = new Set(),
): number {
  let day = dayOf(Math.floor((ms - origin) / dayMs) - 1, zone)
  while (dayOf(day.ordinal + 1, zone).base <= ms) day = dayOf(day.ordinal + 1, zone)
  const sinceMidnight = ms - day.base
  for (let left = days; left > 0;) {
    day = dayOf(day.ordinal + 1, zone)
    if (day.weekday <= 5 && !closed.has(day.date)) left -= 1
  }
  return day.base + sinceMidnight
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
