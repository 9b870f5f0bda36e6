import { DateTime } from 'luxon'

/** An order later than this many working days stops counting as cover, unless somebody confirmed it. Common practice. */
export const believedWorkingDays = 2

/**
 * Working days (Monday to Friday) from `from` to `to`, both YYYY-MM-DD; 0 when `to` is not later.
 * Saturday and Sunday add nothing.
 */
export function workingDaysBetween(from: string, to: string): number {
  const end = DateTime.fromISO(to, { zone: 'utc' })
  let day = DateTime.fromISO(from, { zone: 'utc' })
  if (!day.isValid || !end.isValid) throw new RangeError(`not dates: ${from}, ${to}`)
  const wholeWeeks = Math.max(0, Math.floor(end.diff(day, 'days').days / 7))
  day = day.plus({ weeks: wholeWeeks })
  let days = wholeWeeks * 5
  while (day < end) {
    day = day.plus({ days: 1 })
    if (day.weekday <= 5) days += 1
  }
  return days
}

/** Whether an order still counts as cover on `today` (YYYY-MM-DD, the hospital's own date). */
export function isBelieved(expectedOn: string | null, today: string, confirmed: boolean): boolean {
  return expectedOn === null || confirmed || workingDaysBetween(expectedOn, today) <= believedWorkingDays
}
