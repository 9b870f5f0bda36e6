import type { ScanDate } from './scan-result.ts'

const daysIn = (year: number, month: number): number => new Date(Date.UTC(year, month, 0)).getUTCDate()
const two = (n: number): string => String(n).padStart(2, '0')

/**
 * Full year of two digits by a window that slides with today's year: 51 or more ahead is the last century, 50 or more
 * behind the next. In 2026: 76 is 2076, 77 is 1977. Source: GS1 Syntax Dictionary, `lint_yymmd0.c`.
 *
 * @param today YYYY-MM-DD
 */
export function fullYear(twoDigits: number, today: string): number {
  const now = Number(today.slice(0, 4))
  const century = now - (now % 100)
  const ahead = twoDigits - (now % 100)
  return century + twoDigits + (ahead >= 51 ? -100 : ahead <= -50 ? 100 : 0)
}

/**
 * A calendar day, or the last day of its month when `day` is 0.
 * @returns null when there is no such day; it is never "corrected"
 */
export function calendarDay(year: number, month: number, day: number): { iso: string; day: boolean } | null {
  if (month < 1 || month > 12) return null
  const last = daysIn(year, month)
  if (day < 0 || day > last) return null
  return { iso: `${String(year).padStart(4, '0')}-${two(month)}-${two(day === 0 ? last : day)}`, day: day !== 0 }
}

/**
 * A YYMMDD date of an element string.
 * @param dayZero whether DD = 00 ("no day") is allowed
 * @returns null when it is not six digits or no real date
 * @example readYymmdd('270200', '2026-12-01', true) // => { raw: '270200', iso: '2027-02-28', day: false }
 */
export function readYymmdd(text: string, today: string, dayZero: boolean): ScanDate | null {
  if (!/^[0-9]{6}$/.test(text)) return null
  const day = Number(text.slice(4, 6))
  if (day === 0 && !dayZero) return null
  const found = calendarDay(fullYear(Number(text.slice(0, 2)), today), Number(text.slice(2, 4)), day)
  return found && { raw: text, ...found }
}

/**
 * The day with a number in its year (1 to 365 or 366).
 * @returns null when the year has no such day
 */
export function dayOfYear(year: number, ordinal: number): { iso: string; day: boolean } | null {
  if (ordinal < 1 || ordinal > 366) return null
  const date = new Date(Date.UTC(year, 0, ordinal))
  if (date.getUTCFullYear() !== year) return null
  return { iso: date.toISOString().slice(0, 10), day: true }
}
