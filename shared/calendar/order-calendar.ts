import { DateTime } from 'luxon'

/** When a supplier takes orders and delivers. Weekdays 1 (Monday) to 7; times are local wall time in `zone`. */
export interface OrderCalendar {
  zone: string
  /** Cut-offs of a week. */
  slots: readonly { weekday: number; cutOff: string }[]
  lead: { kind: 'working' | 'calendar'; days: number }
  workingDays: readonly number[]
  arrivalDays: readonly number[]
  arrivalTime: string
  /** Local dates, YYYY-MM-DD, on which neither orders are taken nor deliveries made. */
  holidays: ReadonlySet<string>
  /** Local dates on which the ward takes no delivery; order days and the lead in working days go on as ever. */
  closedToDeliveries?: ReadonlySet<string>
}

/** No calendar: an order may be placed at every moment and takes so many days. */
export interface OpenCalendar {
  leadDays: number
}

/** Further ahead than this there is no slot: the calendar is shut for good. */
const searchDays = 366

const at = (day: DateTime, time: string): DateTime => {
  const [hour = 0, minute = 0] = time.split(':').map(Number)
  return day.set({ hour, minute, second: 0, millisecond: 0 })
}

/**
 * First cut-off at `from` or later (strictly later with `after`), holidays left out. Exactly on the cut-off is in time.
 *
 * @param from epoch ms
 * @returns epoch ms
 * @throws {RangeError} when the calendar has no slot within a year
 */
export function nextSlot(calendar: OrderCalendar, from: number, after = false): number {
  const start = DateTime.fromMillis(from, { zone: calendar.zone }).startOf('day')
  for (let ahead = 0; ahead <= searchDays; ahead += 1) {
    const fits = slotsOn(calendar, start.plus({ days: ahead })).find((t) => (after ? t > from : t >= from))
    if (fits !== undefined) return fits
  }
  throw new RangeError('the order calendar has no day within a year')
}

/** Cut-offs of one local day, earliest first; none on a holiday. */
export function slotsOn(calendar: OrderCalendar, day: DateTime): number[] {
  if (calendar.holidays.has(day.toISODate() ?? '')) return []
  const times = calendar.slots.filter((s) => s.weekday === day.weekday).map((s) => at(day, s.cutOff).toMillis())
  return times.sort((a, b) => a - b)
}

/**
 * When an order placed by a slot arrives: its lead in working or calendar days, then the next permitted delivery
 * moment, never before the slot itself. Working days leave holidays out; calendar days count them. Where the ward takes
 * no delivery, the goods come on the next day that it does.
 *
 * @param slot epoch ms of a cut-off
 * @returns epoch ms
 * @throws {RangeError} when no delivery day comes within a year
 */
export function arrivalOf(calendar: OrderCalendar, slot: number): number {
  const isHoliday = (d: DateTime): boolean => calendar.holidays.has(d.toISODate() ?? '')
  const takesNone = (d: DateTime): boolean => calendar.closedToDeliveries?.has(d.toISODate() ?? '') ?? false
  let day = DateTime.fromMillis(slot, { zone: calendar.zone }).startOf('day')
  if (calendar.lead.kind === 'calendar') day = day.plus({ days: calendar.lead.days })
  else {
    let ahead = 0
    for (let counted = 0; counted < calendar.lead.days;) {
      day = day.plus({ days: 1 })
      ahead += 1
      if (ahead > searchDays + 7 * calendar.lead.days) throw new RangeError('the order calendar has no working day')
      if (calendar.workingDays.includes(day.weekday) && !isHoliday(day)) counted += 1
    }
  }
  for (let ahead = 0; ahead <= searchDays; ahead += 1, day = day.plus({ days: 1 })) {
    const arrival = at(day, calendar.arrivalTime).toMillis()
    if (calendar.arrivalDays.includes(day.weekday) && !isHoliday(day) && !takesNone(day) && arrival >= slot)
      return arrival
  }
  throw new RangeError('the order calendar has no delivery day within a year')
}
