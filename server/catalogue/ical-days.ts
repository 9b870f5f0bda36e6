import ICAL from 'ical.js'
import type { CalendarDay } from '#shared/contracts/calendars.ts'
import { fieldProblem } from '#shared/contracts/problems.ts'
import { recurringDays, toDate, toDay, type DayRule } from './recurring-days.ts'

/** Whole days of an iCalendar file, and the entries that gave none, each with what to do. */
export interface FileDays {
  /** By date, each date once. */
  days: CalendarDay[]
  left: { name: string; why: string }[]
}

/** Dates between which repeating entries are followed, YYYY-MM-DD, both included. */
interface Span {
  from: string
  to: string
}

const mostEntries = 3_000
const mostRepeating = 100
const longestDays = 366
const longestInterval = 1_000

/** An entry that gives no days; the message says what to do. */
class Left extends Error {}

/**
 * Reads the whole-day events of an iCalendar file (RFC 5545): days of several, repeating ones, added and excepted dates,
 * single ones moved or cancelled. Lines may be folded and end in any way.
 *
 * @throws {Problem} 422 at /text where it is no such file
 */
export function wholeDays(text: string, span: Span): FileDays {
  const events = eventsOf(text)
  const moved = movedOnes(events)
  const days = new Map<string, string>()
  const left: FileDays['left'] = []
  let repeating = 0
  for (const event of events.filter((e) => !isMoved(e) && !isCancelled(e))) {
    const name = nameOf(event)
    try {
      repeating += Number(event.hasProperty('rrule'))
      if (repeating > mostRepeating)
        throw new Left(`More than ${mostRepeating} entries repeat. Enter this one's days by hand.`)
      for (const day of daysOf(event, moved.get(uidOf(event)) ?? [], span)) {
        const date = toDate(day.at)
        if (!days.has(date)) days.set(date, day.name)
      }
    } catch (error) {
      if (!(error instanceof Left)) throw error
      left.push({ name, why: error.message })
    }
  }
  return { days: [...days].map(([date, name]) => ({ date, name })).sort((a, b) => a.date.localeCompare(b.date)), left }
}

const unreadable = (detail: string) => fieldProblem('/text', detail)

function eventsOf(text: string): ICAL.Component[] {
  const events = calendarsIn(text).flatMap((calendar) => calendar.getAllSubcomponents('vevent'))
  if (events.length === 0) throw unreadable('the file holds no events: choose the calendar with the closed days in it')
  if (events.length > mostEntries)
    throw unreadable(`the file holds more than ${mostEntries} events: export the closed days alone`)
  return events
}

function calendarsIn(text: string): ICAL.Component[] {
  const plain = text.replace(/^\uFEFF/, '').replace(/\r\n?/g, '\n')
  let parsed: unknown
  try {
    parsed = ICAL.parse(plain)
  } catch {
    throw unreadable('this is no whole iCalendar file: export it again, as .ics, and choose that file')
  }
  const roots = (Array.isArray((parsed as unknown[])[0]) ? parsed : [parsed]) as unknown[][]
  const calendars = roots.filter((root) => root[0] === 'vcalendar')
  if (calendars.length === 0)
    throw unreadable('this is no iCalendar file: it has to begin with BEGIN:VCALENDAR; export it as .ics')
  return calendars.map((root) => new ICAL.Component(root))
}

const textOf = (event: ICAL.Component, property: string): string =>
  String(event.getFirstPropertyValue(property) ?? '').trim()
const uidOf = (event: ICAL.Component): string => textOf(event, 'uid')
const nameOf = (event: ICAL.Component): string => textOf(event, 'summary').replace(/\s+/g, ' ').slice(0, 120)
const isMoved = (event: ICAL.Component): boolean => event.hasProperty('recurrence-id')
const isCancelled = (event: ICAL.Component): boolean => textOf(event, 'status').toUpperCase() === 'CANCELLED'

/** Single ones of a series that were moved, renamed or cancelled, by the series they belong to. */
function movedOnes(events: ICAL.Component[]): Map<string, ICAL.Component[]> {
  const byUid = new Map<string, ICAL.Component[]>()
  for (const event of events.filter(isMoved)) byUid.set(uidOf(event), [...(byUid.get(uidOf(event)) ?? []), event])
  return byUid
}

interface NamedDay {
  at: number
  name: string
}

function daysOf(event: ICAL.Component, moved: ICAL.Component[], span: Span): NamedDay[] {
  const length = lengthOf(event)
  const replaced = new Set(moved.flatMap((one) => datesOf(one, 'recurrence-id')))
  const series = startsOf(event, span)
    .filter((date) => !replaced.has(date))
    .flatMap((date) => run(toDay(date), length, nameOf(event)))
  const singles = moved
    .filter((one) => !isCancelled(one))
    .flatMap((one) => run(toDay(startOf(one)), lengthOf(one), nameOf(one) || nameOf(event)))
  return [...series, ...singles]
}

const run = (from: number, length: number, name: string): NamedDay[] =>
  Array.from({ length }, (_, i) => ({ at: from + i, name }))

const timed = 'It has a time of day. Make it a whole-day entry, or enter the day by hand.'

/** Dates of a property as they stand; one that does not exist, or has a time, is refused. */
function datesOf(event: ICAL.Component, property: string): string[] {
  return event.getAllProperties(property).flatMap((found) => {
    const [, , type, ...values] = found.toJSON() as [string, unknown, string, ...unknown[]]
    return values.map((value) => {
      if (type !== 'date') throw new Left(timed)
      const date = String(value)
      if (!/^\d{4}-\d{2}-\d{2}$/.test(date) || !exists(date))
        throw new Left('Its date does not exist. Enter the day by hand.')
      return date
    })
  })
}

const exists = (date: string): boolean => {
  const at = toDay(date)
  return Number.isFinite(at) && toDate(at) === date
}

function startOf(event: ICAL.Component): string {
  const [start] = datesOf(event, 'dtstart')
  if (start === undefined) throw new Left('It has no date. Enter the day by hand.')
  return start
}

/** Whole days; the end is the first day after. */
function lengthOf(event: ICAL.Component): number {
  const from = toDay(startOf(event))
  const [end] = datesOf(event, 'dtend')
  const duration = event.getFirstPropertyValue('duration')
  const stated = end !== undefined ? toDay(end) - from : duration instanceof ICAL.Duration ? durationDays(duration) : 1
  if (stated > longestDays) throw new Left('It lasts more than a year. Enter the days that are meant by hand.')
  return Math.max(1, stated)
}

const durationDays = (duration: ICAL.Duration): number => Math.ceil(duration.toSeconds() / 86_400)

/** First days of an entry: its own date, those of its rules, those added; without those excepted. */
function startsOf(event: ICAL.Component, span: Span): string[] {
  const start = startOf(event)
  const starts = new Set([start, ...datesOf(event, 'rdate')])
  for (const value of event.getAllProperties('rrule').map((rule) => rule.getFirstValue()))
    for (const date of ruleDays(start, value as ICAL.Recur, span)) starts.add(date)
  // A series whose first day lies before the span is one of the past; a single entry is taken as it stands.
  if (event.hasProperty('rrule') && start < span.from) starts.delete(start)
  for (const date of datesOf(event, 'exdate')) starts.delete(date)
  return [...starts]
}

const notRead = 'It repeats in a way that cannot be followed. Enter its days by hand.'

function ruleDays(start: string, recur: ICAL.Recur, span: Span): string[] {
  try {
    return recurringDays(start, ruleOf(recur), span.from, span.to)
  } catch (error) {
    throw error instanceof RangeError ? new Left(notRead) : error
  }
}

/** The parser numbers weekdays from Sunday, 1. */
const fromSunday = (day: number): number => ((day + 5) % 7) + 1

function ruleOf(recur: ICAL.Recur): DayRule {
  const { parts, freq, interval } = recur
  const known = freq === 'DAILY' || freq === 'WEEKLY' || freq === 'MONTHLY' || freq === 'YEARLY'
  if (!known || interval > longestInterval || parts.BYHOUR || parts.BYMINUTE || parts.BYSECOND) throw new Left(notRead)
  return {
    freq,
    interval,
    count: recur.count ?? null,
    until: recur.until?.toString().slice(0, 10) ?? null,
    weekStart: fromSunday(recur.wkst),
    months: parts.BYMONTH ?? [],
    weekNumbers: parts.BYWEEKNO ?? [],
    yearDays: parts.BYYEARDAY ?? [],
    monthDays: parts.BYMONTHDAY ?? [],
    weekdays: (parts.BYDAY ?? []).map(weekdayOf),
    positions: parts.BYSETPOS ?? [],
  }
}

/** Such as MO, 1MO or -1FR. */
function weekdayOf(text: string): DayRule['weekdays'][number] {
  const found = /^([+-]?\d{1,2})?(MO|TU|WE|TH|FR|SA|SU)$/.exec(text)
  if (!found) throw new Left(notRead)
  return { nth: Number(found[1] ?? 0), weekday: ['MO', 'TU', 'WE', 'TH', 'FR', 'SA', 'SU'].indexOf(found[2]!) + 1 }
}
