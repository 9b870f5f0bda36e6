import { DateTime } from 'luxon'

/** Everything that turns a number or a date into words. Dates always have the month in letters. */
const LOCALE = 'en-GB'
const whole = new Intl.NumberFormat(LOCALE, { maximumFractionDigits: 0 })

/** Whole units, thousands apart: 1,250. */
export const quantity = (value: number): string => whole.format(value).replace('-', '−')

/** With its sign, for changes: +3, −2, 0. */
export const signed = (value: number): string => (value > 0 ? `+${quantity(value)}` : quantity(value))

/** At most `digits` decimals, no trailing zeros, a zero before the point: 0.5, 12, 6.2. */
export const decimal = (value: number, digits = 1): string =>
  new Intl.NumberFormat(LOCALE, { maximumFractionDigits: digits }).format(value).replace('-', '−')

/** "1 box", "3 boxes"; units of use are given by the hospital and read as they are written. */
export function counted(value: number, one: string, many = plural(one)): string {
  return `${quantity(value)} ${value === 1 ? one : many}`
}

/** Plain English plural of a count unit: box → boxes, each → each, pack → packs. */
export function plural(word: string): string {
  if (/^(each|pair)$/i.test(word)) return word.toLowerCase() === 'each' ? word : `${word}s`
  if (/(s|x|z|ch|sh)$/i.test(word)) return `${word}es`
  if (/[^aeiou]y$/i.test(word)) return `${word.slice(0, -1)}ies`
  return `${word}s`
}

/** Money in the hospital's currency: £218.40, whole amounts without decimals. */
export function money(value: number, currency: string): string {
  const fraction = Number.isInteger(value) ? 0 : 2
  return new Intl.NumberFormat(LOCALE, {
    style: 'currency',
    currency,
    minimumFractionDigits: fraction,
    maximumFractionDigits: 2,
  }).format(value)
}

/** Percent from a share, without trailing zeros: 99.5 %. */
export const percent = (share: number): string => `${decimal(share * 100, 2)} %`

const oneIn = (miss: number): number => {
  const raw = 1 / miss
  if (raw < 20) return Math.round(raw)
  if (raw < 100) return Math.round(raw / 5) * 5
  return Math.round(raw / 10 ** (Math.floor(Math.log10(raw)) - 1)) * 10 ** (Math.floor(Math.log10(raw)) - 1)
}

/** A service level in odds: 0.995 → "about 1 delivery cycle in 200". */
export function odds(level: number): string {
  const miss = 1 - level
  if (miss <= 0.00005) return 'fewer than 1 delivery cycle in 10,000'
  if (miss >= 0.5) return 'every second delivery cycle or more'
  return `about 1 delivery cycle in ${quantity(oneIn(miss))}`
}

/** The bare denominator of `odds`, for pictures: 0.995 → 200. */
export const oddsIn = (level: number): number => oneIn(Math.max(1 - level, 0.00005))

/** How often that is for one place: cycles a year × chance a cycle, as "about once in 8 years". */
export function onceIn(level: number, cyclesPerYear: number): string {
  const perYear = (1 - level) * cyclesPerYear
  if (!(perYear > 0)) return 'hardly ever'
  const years = 1 / perYear
  if (years >= 100) return 'less than once in 100 years'
  if (years >= 1.5) return `about once in ${quantity(Math.round(years))} years`
  if (years >= 0.75) return 'about once a year'
  return `about ${quantity(Math.round(perYear))} times a year`
}

const at = (iso: string, zone: string): DateTime => DateTime.fromISO(iso, { zone }).setLocale(LOCALE)
const plain = (date: string): DateTime => DateTime.fromISO(date.slice(0, 10), { zone: 'utc' }).setLocale(LOCALE)

/** 12 May 2027, from a plain date. */
export const day = (date: string): string => plain(date).toFormat('d LLLL yyyy')
/** 12 May, where the year is plain from the place. */
export const shortDay = (date: string): string => plain(date).toFormat('d LLL')
/** 12 May 2027, 07:10, from an instant. */
export const moment = (iso: string, zone: string): string => at(iso, zone).toFormat('d LLLL yyyy, HH:mm')
/** Fri 25 December, from a plain date. */
export const weekdayDay = (date: string): string => plain(date).toFormat('ccc d LLLL')
/** Wed 23 Dec, 10:00, from an instant. */
export const dayAndClock = (iso: string, zone: string): string => at(iso, zone).toFormat('ccc d LLL, HH:mm')
/** Wed 23 Dec, from an instant. */
export const weekdayOf = (iso: string, zone: string): string => at(iso, zone).toFormat('ccc d LLL')
/** Thursday 14 May. */
export const dayHeading = (iso: string, zone: string): string => at(iso, zone).toFormat('cccc d LLLL')
/** The plain date of an instant in the hospital's zone. */
export const dateOf = (iso: string, zone: string): string => at(iso, zone).toFormat('yyyy-MM-dd')
export const clock = (iso: string, zone: string): string => at(iso, zone).toFormat('HH:mm')

/** A coming day as people say it: today, tomorrow, Thu within a week, else 28 May. */
export function dueOn(date: string, today: string): string {
  const gap = Math.round(plain(date).diff(plain(today), 'days').days)
  if (gap === 0) return 'today'
  if (gap === 1) return 'tomorrow'
  if (gap > 1 && gap < 7) return plain(date).toFormat('ccc')
  return shortDay(date)
}

/** The same, short enough for a column: today, Wed, 8 Dec. */
export function dueShort(date: string, today: string): string {
  const gap = Math.round(plain(date).diff(plain(today), 'days').days)
  return gap === 1 ? plain(date).toFormat('ccc') : dueOn(date, today)
}

/** A past or coming instant near now: "today 06:12", "yesterday 21:40", "Tue 14:00", "3 May, 08:15". */
export function near(iso: string, now: string, zone: string): string {
  const gap = Math.round(plain(dateOf(iso, zone)).diff(plain(dateOf(now, zone)), 'days').days)
  if (gap === 0) return `today ${clock(iso, zone)}`
  if (gap === -1) return `yesterday ${clock(iso, zone)}`
  if (gap === 1) return `tomorrow ${clock(iso, zone)}`
  if (Math.abs(gap) < 7) return at(iso, zone).toFormat('ccc HH:mm')
  return at(iso, zone).toFormat('d LLL, HH:mm')
}

/** Calendar days between an instant and now, in the hospital's zone. */
export const daysAgo = (iso: string, now: string, zone: string): number =>
  Math.max(0, Math.round(plain(dateOf(now, zone)).diff(plain(dateOf(iso, zone)), 'days').days))

/** "counted today", "counted yesterday", "counted 9 days ago". */
export function ageOfCount(days: number): string {
  if (days <= 0) return 'counted today'
  if (days === 1) return 'counted yesterday'
  return `counted ${quantity(days)} days ago`
}

/** A length of time in words: 40 minutes, 27 hours, 3 days. */
export function duration(minutes: number): string {
  if (minutes < 1) return 'less than a minute'
  if (minutes < 90) return counted(Math.round(minutes), 'minute')
  if (minutes < 48 * 60) return counted(Math.round(minutes / 60), 'hour')
  return counted(Math.round(minutes / 1440), 'day')
}

/** Days with at most one decimal: "1 day", "2.5 days". */
export const dayCount = (days: number): string => `${decimal(days)} ${decimal(days) === '1' ? 'day' : 'days'}`
