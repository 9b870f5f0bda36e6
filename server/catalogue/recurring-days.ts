/** A day as a number: days since 1 January 1970. */
type DayNumber = number

/** A recurrence rule of RFC 5545 for whole days. Weekdays 1 (Monday) to 7. */
export interface DayRule {
  freq: 'DAILY' | 'WEEKLY' | 'MONTHLY' | 'YEARLY'
  interval: number
  count: number | null
  /** Last permitted day, YYYY-MM-DD. */
  until: string | null
  weekStart: number
  months: number[]
  weekNumbers: number[]
  yearDays: number[]
  monthDays: number[]
  /** `nth` 0 is every such weekday; below 0 counts from the end of the month or year. */
  weekdays: { nth: number; weekday: number }[]
  positions: number[]
}

const dayMs = 86_400_000
/** So many days are looked at for one rule: more than a hundred years. */
const mostDays = 40_000

export const toDay = (date: string): DayNumber => Math.round(Date.parse(`${date}T00:00:00Z`) / dayMs)
export const toDate = (day: DayNumber): string => new Date(day * dayMs).toISOString().slice(0, 10)

const dayOf = (year: number, month: number, day: number): DayNumber =>
  Math.round(Date.UTC(year, month - 1, day) / dayMs)
const weekdayOf = (day: DayNumber): number => ((((day + 3) % 7) + 7) % 7) + 1
const partsOf = (day: DayNumber) => {
  const date = new Date(day * dayMs)
  return { year: date.getUTCFullYear(), month: date.getUTCMonth() + 1, day: date.getUTCDate() }
}
const startOfWeek = (day: DayNumber, weekStart: number): DayNumber => day - ((weekdayOf(day) - weekStart + 7) % 7)

/**
 * Days on which something recurs, from `from` to `to`, both YYYY-MM-DD; the start itself always counts as the first.
 *
 * Expanded period by period, each day held against the rule, so that a rule that never comes true ends like any other
 * and 29 February stays out of other years. Source: RFC 5545, 3.3.10 with its table of limits and expansions.
 *
 * @throws {RangeError} for a rule with a count that began more than a hundred years ago
 */
export function recurringDays(start: string, rule: DayRule, from: string, to: string): string[] {
  const first = toDay(start)
  const last = Math.min(toDay(to), rule.until === null ? Infinity : toDay(rule.until))
  const days = first <= last ? [first] : []
  // What was counted earlier matters only where there is a count.
  let step = rule.count === null ? Math.max(0, stepsBefore(first, toDay(from), rule)) : 0
  for (let looked = 0; ; step += 1) {
    const period = periodAt(first, step, rule)
    if (period.from > last || (rule.count !== null && days.length >= rule.count)) break
    looked += period.to - period.from + 1
    if (looked > mostDays) throw new RangeError('the rule goes back too far to be counted')
    for (const day of chosenIn(period, first, rule)) if (day > first && day <= last) days.push(day)
  }
  const counted = rule.count === null ? days : days.slice(0, rule.count)
  return counted.filter((day) => day >= toDay(from)).map(toDate)
}

interface Period {
  from: DayNumber
  to: DayNumber
}

function periodAt(first: DayNumber, step: number, rule: DayRule): Period {
  const ahead = step * rule.interval
  const { year, month } = partsOf(first)
  switch (rule.freq) {
    case 'DAILY':
      return { from: first + ahead, to: first + ahead }
    case 'WEEKLY': {
      const from = startOfWeek(first, rule.weekStart) + 7 * ahead
      return { from, to: from + 6 }
    }
    case 'MONTHLY':
      return { from: dayOf(year, month + ahead, 1), to: dayOf(year, month + ahead + 1, 0) }
    case 'YEARLY':
      return { from: dayOf(year + ahead, 1, 1), to: dayOf(year + ahead, 12, 31) }
  }
}

const daysAtMost = { DAILY: 1, WEEKLY: 7, MONTHLY: 31, YEARLY: 366 }

/** Periods that surely end before a day. */
const stepsBefore = (first: DayNumber, from: DayNumber, rule: DayRule): number =>
  Math.floor((from - first) / (daysAtMost[rule.freq] * rule.interval)) - 1

function chosenIn(period: Period, first: DayNumber, rule: DayRule): DayNumber[] {
  const days: DayNumber[] = []
  for (let day = period.from; day <= period.to; day += 1) if (fits(day, first, rule)) days.push(day)
  if (rule.positions.length === 0) return days
  return days.filter((_, i) => rule.positions.includes(i + 1) || rule.positions.includes(i - days.length))
}

function fits(day: DayNumber, first: DayNumber, rule: DayRule): boolean {
  const { year, month, day: dayOfMonth } = partsOf(day)
  const listed = (values: number[], value: number, length: number): boolean =>
    values.length === 0 || values.includes(value) || values.includes(value - length - 1)
  const monthLength = dayOf(year, month + 1, 0) - dayOf(year, month, 1) + 1
  const yearStart = dayOf(year, 1, 1)
  const yearLength = dayOf(year, 12, 31) - yearStart + 1
  return (
    (rule.months.length === 0 || rule.months.includes(month)) &&
    listed(rule.monthDays, dayOfMonth, monthLength) &&
    listed(rule.yearDays, day - yearStart + 1, yearLength) &&
    fitsWeekNumber(day, rule) &&
    fitsWeekday(day, rule) &&
    fitsStart(day, first, rule)
  )
}

/** Week 1 is the first with at least four days in its year. */
function fitsWeekNumber(day: DayNumber, { weekNumbers, weekStart }: DayRule): boolean {
  if (weekNumbers.length === 0) return true
  const year = partsOf(startOfWeek(day, weekStart) + 3).year
  const firstWeek = (of: number): DayNumber => startOfWeek(dayOf(of, 1, 4), weekStart)
  const number = (startOfWeek(day, weekStart) - firstWeek(year)) / 7 + 1
  const weeks = (firstWeek(year + 1) - firstWeek(year)) / 7
  return weekNumbers.includes(number) || weekNumbers.includes(number - weeks - 1)
}

/** A numbered weekday is counted within the month; in a yearly rule without months within the year. */
function fitsWeekday(day: DayNumber, rule: DayRule): boolean {
  if (rule.weekdays.length === 0) return true
  const { year, month } = partsOf(day)
  const byYear = rule.freq === 'YEARLY' && rule.months.length === 0
  const from = byYear ? dayOf(year, 1, 1) : dayOf(year, month, 1)
  const to = byYear ? dayOf(year, 12, 31) : dayOf(year, month + 1, 0)
  const nth = Math.floor((day - from) / 7) + 1
  const nthLast = -(Math.floor((to - day) / 7) + 1)
  return rule.weekdays.some((w) => w.weekday === weekdayOf(day) && (w.nth === 0 || w.nth === nth || w.nth === nthLast))
}

/** What the rule leaves open is that of the start. */
function fitsStart(day: DayNumber, first: DayNumber, rule: DayRule): boolean {
  const own = partsOf(day)
  const start = partsOf(first)
  const hasDay = rule.monthDays.length + rule.yearDays.length + rule.weekdays.length > 0
  if (hasDay || rule.freq === 'DAILY') return true
  if (rule.freq === 'WEEKLY' || rule.weekNumbers.length > 0) return weekdayOf(day) === weekdayOf(first)
  if (rule.freq === 'MONTHLY' || rule.months.length > 0) return own.day === start.day
  return own.month === start.month && own.day === start.day
}
