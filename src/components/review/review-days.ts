import { DateTime } from 'luxon'

/** The days a review may fall on: after today, at most two years on; three months are offered. Plain dates. */
export function reviewDays(today: string): { first: string; last: string; usual: string } {
  const start = DateTime.fromISO(today, { zone: 'utc' })
  const plain = (date: DateTime): string => date.toFormat('yyyy-MM-dd')
  return {
    first: plain(start.plus({ days: 1 })),
    last: plain(start.plus({ years: 2 })),
    usual: plain(start.plus({ months: 3 })),
  }
}
