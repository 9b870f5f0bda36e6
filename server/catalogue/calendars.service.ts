import { DateTime } from 'luxon'
import type { Calendar, CalendarDay, CalendarImport } from '#shared/contracts/calendars.ts'
import { mostDays } from '#shared/contracts/calendars.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import { isDuplicate } from '../db/errors.ts'
import { enqueue } from '../jobs/jobs.service.ts'
import * as repo from './calendars.repository.ts'
import { wholeDays } from './ical-days.ts'
import { liveBinsOfSuppliers } from './items.repository.ts'
import { liveBinsOfWards } from './places.repository.ts'
import { checkReach } from './reach.service.ts'

/** The calendar a record names. @throws {Problem} 422 at /calendarId where there is none in use */
export async function checkCalendar(db: Reader, calendarId: string | null): Promise<number | null> {
  if (calendarId === null) return null
  const row = await repo.findCalendar(db, Number(calendarId))
  if (!row || row.retiredAt) throw fieldProblem('/calendarId', 'choose a calendar that is in use')
  return row.id
}

/** From this month on the next year should have days. */
const nextYearFrom = 10

/**
 * The next year a calendar says nothing about: this one where it is in use, and from October on the one after.
 *
 * @param today the hospital's own date, YYYY-MM-DD
 */
export function emptyYearOf(dates: readonly string[], today: string, isInUse: boolean): number | null {
  const [year = 0, month = 0] = today.split('-').map(Number)
  const isEmpty = (of: number): boolean => !dates.some((date) => date.startsWith(`${of}-`))
  if (isInUse && isEmpty(year)) return year
  return month >= nextYearFrom && isEmpty(year + 1) ? year + 1 : null
}

type Uses = Awaited<ReturnType<typeof repo.listUses>>

const isInUse = (id: number, uses: Uses): boolean =>
  uses.hospital.calendarId === id ||
  uses.suppliers.some((s) => s.calendarId === id) ||
  uses.wards.some((w) => w.calendarId === id)

const todayOf = (clock: Clock, uses: Uses): string =>
  DateTime.fromJSDate(clock.now(), { zone: uses.hospital.timeZone }).toISODate() ?? ''

async function toCalendars(db: Reader, clock: Clock, rows: repo.CalendarRow[]): Promise<Calendar[]> {
  const uses = await repo.listUses(db)
  const today = todayOf(clock, uses)
  const all = await repo.listDays(
    db,
    rows.map((r) => r.id),
  )
  return rows.map((row) => {
    const days = all.filter((d) => d.calendarId === row.id).map(({ date, name }) => ({ date, name }))
    const dates = days.map((d) => d.date)
    return {
      id: String(row.id),
      name: row.name,
      days,
      isHospital: uses.hospital.calendarId === row.id,
      suppliers: uses.suppliers.filter((s) => s.calendarId === row.id).length,
      wards: uses.wards.filter((w) => w.calendarId === row.id).length,
      emptyYear: row.retiredAt ? null : emptyYearOf(dates, today, isInUse(row.id, uses)),
      retired: row.retiredAt !== null,
    }
  })
}

export async function listCalendars(db: Reader, clock: Clock, query: { retired: 'yes' | 'no' }) {
  const items = await toCalendars(db, clock, await repo.listCalendarRows(db, { retired: query.retired === 'yes' }))
  return { items, total: items.length, page: 1, pageSize: Math.max(1, items.length) }
}

/** Calendars somebody relies on that say nothing about a year that is near. */
export async function emptyCalendars(
  db: Reader,
  clock: Clock,
): Promise<{ id: string; name: string; emptyYear: number }[]> {
  const { items } = await listCalendars(db, clock, { retired: 'no' })
  return items.flatMap(({ id, name, emptyYear, ...c }) =>
    emptyYear !== null && (c.isHospital || c.suppliers > 0 || c.wards > 0) ? [{ id, name, emptyYear }] : [],
  )
}

export async function readCalendar(db: Reader, clock: Clock, id: number): Promise<Calendar> {
  const row = await repo.findCalendar(db, id)
  if (!row) throw problem('not-found')
  return (await toCalendars(db, clock, [row]))[0]!
}

function nameTaken(error: unknown): never {
  if (isDuplicate(error)) throw fieldProblem('/name', 'another calendar has this name')
  throw error
}

export async function createCalendar(
  tx: Tx,
  clock: Clock,
  actorId: number | null,
  input: { name: string },
): Promise<Calendar> {
  const id = await repo.insertCalendar(tx, input.name).catch(nameTaken)
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'calendar-added',
    subject: 'calendar',
    subjectId: id,
    after: input,
  })
  return readCalendar(tx, clock, id)
}

interface Change {
  name?: string
  days?: CalendarDay[]
  retired?: boolean
}

export async function updateCalendar(
  tx: Tx,
  clock: Clock,
  actorId: number | null,
  id: number,
  input: Change,
): Promise<Calendar> {
  const row = await repo.lockCalendar(tx, id)
  if (!row) throw problem('not-found')
  if (input.retired && isInUse(id, await repo.listUses(tx)))
    throw problem('in-use', 'The hospital, suppliers or wards still go by this calendar. Give them another one first.')
  const before = await readCalendar(tx, clock, id)
  await repo
    .updateCalendarRow(tx, id, {
      ...(input.name === undefined ? {} : { name: input.name }),
      ...(input.retired === undefined ? {} : { retiredAt: input.retired ? clock.now() : null }),
    })
    .catch(nameTaken)
  if (input.days) await setDays(tx, clock, before, input.days)
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'calendar-changed',
    subject: 'calendar',
    subjectId: id,
    before,
    after: input,
  })
  return readCalendar(tx, clock, id)
}

/** Replaces the days; where dates changed, what is worked out from them is looked at again. */
async function setDays(tx: Tx, clock: Clock, before: Calendar, days: CalendarDay[]): Promise<void> {
  const seen = new Set<string>()
  const twice = days.findIndex((d) => seen.has(d.date) || !seen.add(d.date))
  if (twice >= 0) throw fieldProblem(`/days/${twice}/date`, 'this date stands in the list twice')
  const id = Number(before.id)
  await repo.deleteDays(tx, id)
  await repo.insertDays(tx, id, days)
  const sameDates = before.days.length === seen.size && before.days.every((d) => seen.has(d.date))
  if (sameDates) return
  await checkReach(tx, clock.now(), '/days')
  await lookAgain(tx, clock.now(), id)
}

/** Asks for the places that go by a calendar to be looked at again. */
async function lookAgain(tx: Tx, now: Date, calendarId: number): Promise<void> {
  const uses = await repo.listUses(tx)
  if (uses.hospital.calendarId === calendarId)
    return enqueue(tx, now, 'policy-all', { cause: 'calendar' }, 'policy-all')
  const idsOf = (rows: { id: number; calendarId: number | null }[]): number[] =>
    rows.filter((r) => r.calendarId === calendarId).map((r) => r.id)
  const bins = [
    ...(await liveBinsOfSuppliers(tx, idsOf(uses.suppliers))),
    ...(await liveBinsOfWards(tx, idsOf(uses.wards))),
  ]
  await touchBins(tx, now, [...new Set(bins)], 'calendar')
}

/** Adds the whole days of an iCalendar file; repeating ones from last year to three years ahead. */
export async function importCalendar(
  tx: Tx,
  clock: Clock,
  actorId: number,
  id: number,
  text: string,
): Promise<CalendarImport> {
  const row = await repo.lockCalendar(tx, id)
  if (!row) throw problem('not-found')
  if (row.retiredAt) throw problem('in-use', 'This calendar is retired. Take it into use again first.')
  const before = await readCalendar(tx, clock, id)
  const year = Number(todayOf(clock, await repo.listUses(tx)).slice(0, 4))
  const { days, left } = wholeDays(text, { from: `${year - 1}-01-01`, to: `${year + 3}-12-31` })
  const known = new Set(before.days.map((d) => d.date))
  const fresh = days.filter((d) => !known.has(d.date))
  if (known.size + fresh.length > mostDays)
    throw fieldProblem(
      '/text',
      `a calendar holds at most ${mostDays} days, and this would be ${known.size + fresh.length}`,
    )
  if (fresh.length) {
    await repo.insertDays(tx, id, fresh)
    await checkReach(tx, clock.now(), '/text')
    await lookAgain(tx, clock.now(), id)
  }
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'calendar-imported',
    subject: 'calendar',
    subjectId: id,
    after: { added: fresh, left: left.length },
  })
  return { calendar: await readCalendar(tx, clock, id), added: fresh.length, known: days.length - fresh.length, left }
}
