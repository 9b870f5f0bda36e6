import { DateTime } from 'luxon'

/** When a room counts. */
export interface CountingCalendar {
  zone: string
  /** Weekdays 1 (Monday) to 7 on which it counts; empty: every day. */
  weekdays: readonly number[]
  /** Local dates, YYYY-MM-DD, on which it does not. */
  closed: ReadonlySet<string>
}

const dayMs = 86_400_000
const searchDays = 366

/**
 * When the next count is due: the rhythm after the last one, moved on to the next counting day at the same wall time.
 *
 * @param counting null: every day
 * @param countedAt epoch ms
 * @returns epoch ms
 * @throws {RangeError} when no counting day comes within a year
 */
export function nextCountAt(counting: CountingCalendar | null, countedAt: number, rhythmDays: number): number {
  const planned = countedAt + rhythmDays * dayMs
  if (counting === null) return planned
  const first = DateTime.fromMillis(planned, { zone: counting.zone })
  for (let ahead = 0; ahead <= searchDays; ahead += 1) {
    const day = first.plus({ days: ahead })
    if (isCountingDay(counting, day)) return day.toMillis()
  }
  throw new RangeError('the room has no counting day within a year: open a weekday or shorten its closure')
}

const isCountingDay = (counting: CountingCalendar, day: DateTime): boolean =>
  (counting.weekdays.length === 0 || counting.weekdays.includes(day.weekday)) &&
  !counting.closed.has(day.toISODate() ?? '')
