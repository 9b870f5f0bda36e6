import { nextCountAt } from '#shared/calendar/counting-calendar.ts'
import { arrivalOf, nextSlot } from '#shared/calendar/order-calendar.ts'
import { fieldProblem } from '#shared/contracts/problems.ts'
import type { Reader } from '../db/client.ts'
import { calendarOf, closedDays, countingOf, placeTimes } from './calendar.service.ts'
import { listReach } from './places.repository.ts'

const dayMs = 86_400_000
/** Moments from which a year is looked at: what may be entered ahead. */
const yearsAhead = [0, 1, 2, 3]

/**
 * Refuses closed days, order days or counting days that would shut somebody out for a whole year: nothing could be
 * worked out any more.
 *
 * @param pointer the field that was changed
 * @throws {Problem} 422 at that field
 */
export async function checkReach(db: Reader, now: Date, pointer: string): Promise<void> {
  const closed = await closedDays(db)
  const { suppliers, places, timeZone } = await listReach(db)
  const starts = yearsAhead.map((years) => now.getTime() + years * 365 * dayMs)
  const refuse = (who: string, what: string) =>
    fieldProblem(pointer, `${who} would ${what} for a whole year: leave more days open`)
  const wards = [...new Map(places.map((place) => [place.wardCalendarId, place])).values()]
  for (const supplier of suppliers)
    for (const ward of wards.length ? wards : [{ wardCalendarId: null }]) {
      const calendar = calendarOf(supplier, timeZone, placeTimes(closed, supplier, ward))
      if ('leadDays' in calendar) continue
      if (!starts.every((from) => isReached(() => arrivalOf(calendar, nextSlot(calendar, from)))))
        throw refuse(supplier.name, 'take no order or bring nothing')
    }
  for (const place of places) {
    const counting = countingOf(timeZone, placeTimes(closed, null, place))
    if (!starts.every((from) => isReached(() => nextCountAt(counting, from, 0))))
      throw refuse(place.roomName, 'count nothing')
  }
}

function isReached(find: () => number): boolean {
  try {
    find()
    return true
  } catch (error) {
    if (error instanceof RangeError) return false
    throw error
  }
}
