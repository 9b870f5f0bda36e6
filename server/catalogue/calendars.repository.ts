import { and, asc, eq, inArray, isNotNull, isNull } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { calendarDays, calendars, hospitals, suppliers, wards } from './catalogue.tables.ts'

export type CalendarRow = typeof calendars.$inferSelect
export type CalendarDayRow = typeof calendarDays.$inferSelect

export async function listCalendarRows(db: Reader, filter: { retired: boolean }): Promise<CalendarRow[]> {
  return db
    .select()
    .from(calendars)
    .where(filter.retired ? isNotNull(calendars.retiredAt) : isNull(calendars.retiredAt))
    .orderBy(asc(calendars.name), asc(calendars.id))
}

export async function findCalendar(db: Reader, id: number): Promise<CalendarRow | null> {
  const [row] = await db.select().from(calendars).where(eq(calendars.id, id))
  return row ?? null
}

export async function lockCalendar(tx: Tx, id: number): Promise<CalendarRow | null> {
  const [row] = await tx.select().from(calendars).where(eq(calendars.id, id)).for('update')
  return row ?? null
}

export async function insertCalendar(tx: Tx, name: string): Promise<number> {
  const [made] = await tx.insert(calendars).values({ name, retiredAt: null }).$returningId()
  return made!.id
}

export async function updateCalendarRow(tx: Tx, id: number, set: Partial<CalendarRow>): Promise<void> {
  if (Object.keys(set).length) await tx.update(calendars).set(set).where(eq(calendars.id, id))
}

/** Days of some calendars, by date. */
export async function listDays(db: Reader, calendarIds: number[]): Promise<CalendarDayRow[]> {
  if (calendarIds.length === 0) return []
  return db
    .select()
    .from(calendarDays)
    .where(inArray(calendarDays.calendarId, calendarIds))
    .orderBy(asc(calendarDays.calendarId), asc(calendarDays.date))
}

/** Every closed day, and which calendar holds where no other is named. */
export async function listClosedDays(db: Reader) {
  const days = await db.select().from(calendarDays)
  const [hospital] = await db.select({ calendarId: hospitals.calendarId }).from(hospitals).where(eq(hospitals.id, 1))
  return { days, hospitalCalendarId: hospital?.calendarId ?? null }
}

export async function insertDays(tx: Tx, calendarId: number, days: { date: string; name: string }[]): Promise<void> {
  const rows = days.map((day) => ({ calendarId, ...day }))
  for (let i = 0; i < rows.length; i += 500) await tx.insert(calendarDays).values(rows.slice(i, i + 500))
}

export async function deleteDays(tx: Tx, calendarId: number): Promise<void> {
  await tx.delete(calendarDays).where(eq(calendarDays.calendarId, calendarId))
}

/** Who goes by which calendar: the hospital, and suppliers and wards in use that name one. */
export async function listUses(db: Reader) {
  const [hospital] = await db
    .select({ calendarId: hospitals.calendarId, timeZone: hospitals.timeZone })
    .from(hospitals)
    .where(eq(hospitals.id, 1))
  return {
    hospital: hospital ?? { calendarId: null, timeZone: 'utc' },
    suppliers: await db
      .select({ id: suppliers.id, calendarId: suppliers.calendarId })
      .from(suppliers)
      .where(and(isNotNull(suppliers.calendarId), isNull(suppliers.retiredAt))),
    wards: await db
      .select({ id: wards.id, calendarId: wards.calendarId })
      .from(wards)
      .where(and(isNotNull(wards.calendarId), isNull(wards.retiredAt))),
  }
}
