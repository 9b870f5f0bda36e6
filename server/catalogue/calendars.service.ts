import { fieldProblem } from '#shared/contracts/problems.ts'
import type { Reader } from '../db/client.ts'
import * as repo from './calendars.repository.ts'

/** The calendar a record names. @throws {Problem} 422 at /calendarId where there is none in use */
export async function checkCalendar(db: Reader, calendarId: string | null): Promise<number | null> {
  if (calendarId === null) return null
  const row = await repo.findCalendar(db, Number(calendarId))
  if (!row || row.retiredAt) throw fieldProblem('/calendarId', 'choose a calendar that is in use')
  return row.id
}
