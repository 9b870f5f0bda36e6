import type { CountingCalendar } from '#shared/calendar/counting-calendar.ts'
import { arrivalOf, nextSlot, type OpenCalendar, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { protectionInterval, type ProtectionInterval } from '#shared/calendar/protection-interval.ts'
import type { Reader } from '../db/client.ts'
import { listClosedDays } from './calendars.repository.ts'

/** What of a supplier decides when things come. */
export interface SupplierTimes {
  orderDays: string
  cutOff: string
  arrivalDays: string
  arrivalTime: string
  leadWorkingDays: number
  leadTimeDays: number | null
}

const workingDays = [1, 2, 3, 4, 5]
/** Where nothing is known of a supplier. */
const unknownLeadDays = 2

const weekdays = (digits: string): number[] => (digits ? [...digits].map(Number) : workingDays)

type Dates = ReadonlySet<string>

/** Closed days as they hold: of its own calendar, else of the hospital's, else none. Local dates, YYYY-MM-DD. */
export interface ClosedDays {
  ofSupplier(supplier: { calendarId: number | null } | null): Dates
  ofWard(ward: { calendarId: number | null }): Dates
  /** What the first of some dates is called that has a name; empty where none has. */
  nameOf(dates: readonly string[]): string
}

/** Reads every closed day once, for one bin or for a whole run. */
export async function closedDays(db: Reader): Promise<ClosedDays> {
  const { days, hospitalCalendarId } = await listClosedDays(db)
  const byCalendar = new Map<number, Set<string>>()
  const names = new Map<string, string>()
  for (const day of days) {
    const own = byCalendar.get(day.calendarId) ?? new Set<string>()
    byCalendar.set(day.calendarId, own.add(day.date))
    if (day.name !== '' && (!names.has(day.date) || day.calendarId === hospitalCalendarId))
      names.set(day.date, day.name)
  }
  const none: Dates = new Set()
  const datesOf = (calendarId: number | null): Dates => {
    const named = calendarId ?? hospitalCalendarId
    return (named === null ? undefined : byCalendar.get(named)) ?? none
  }
  return {
    ofSupplier: (supplier) => datesOf(supplier?.calendarId ?? null),
    ofWard: (ward) => datesOf(ward.calendarId),
    nameOf: (dates) => dates.map((date) => names.get(date)).find((name) => name !== undefined) ?? '',
  }
}

/** What beside the supplier's own days decides for one place: closed days of both sides, and when the room counts. */
export interface PlaceTimes {
  supplier: Dates
  ward: Dates
  /** Weekdays as digits; empty is every day. */
  countDays: string
}

export const placeTimes = (
  closed: ClosedDays,
  supplier: { calendarId: number | null } | null,
  place: { wardCalendarId: number | null; countDays?: string },
): PlaceTimes => ({
  supplier: closed.ofSupplier(supplier),
  ward: closed.ofWard({ calendarId: place.wardCalendarId }),
  countDays: place.countDays ?? '',
})

/**
 * A supplier's calendar as one place meets it; without a cut-off it takes orders at every moment. Closed days apply to
 * dated slots only: a supplier without a cut-off states its time in days, come what may.
 */
export function calendarOf(
  supplier: SupplierTimes | null,
  zone: string,
  times?: Pick<PlaceTimes, 'supplier' | 'ward'>,
): OrderCalendar | OpenCalendar {
  if (!supplier) return { leadDays: unknownLeadDays }
  if (!supplier.cutOff) return { leadDays: supplier.leadTimeDays ?? supplier.leadWorkingDays }
  return {
    zone,
    slots: weekdays(supplier.orderDays).map((weekday) => ({ weekday, cutOff: supplier.cutOff })),
    lead: { kind: 'working', days: supplier.leadWorkingDays },
    workingDays,
    arrivalDays: weekdays(supplier.arrivalDays),
    arrivalTime: supplier.arrivalTime,
    holidays: times?.supplier ?? new Set(),
    closedToDeliveries: times?.ward ?? new Set(),
  }
}

/** When a room counts: on its weekdays, not while its ward is closed. */
export const countingOf = (zone: string, times: Pick<PlaceTimes, 'ward' | 'countDays'>): CountingCalendar => ({
  zone,
  weekdays: [...times.countDays].map(Number),
  closed: times.ward,
})

/** The protection interval with its moments as ISO text, as stored and shown. */
export interface Protection extends Pick<ProtectionInterval, 'days' | 'leadMeanDays' | 'reviewDays'> {
  countedAt: string
  firstOrderBy: string
  firstArrival: string
  nextOrderBy: string
  nextArrival: string
}

const iso = (ms: number): string => new Date(ms).toISOString()

export function protectionOf(
  supplier: SupplierTimes | null,
  zone: string,
  moment: { countedAt: Date; asOf: Date; rhythmDays: number },
  times?: PlaceTimes,
): Protection {
  const found = protectionInterval(calendarOf(supplier, zone, times), {
    countedAt: moment.countedAt.getTime(),
    asOf: moment.asOf.getTime(),
    rhythmDays: moment.rhythmDays,
    counting: times ? countingOf(zone, times) : null,
  })
  return {
    days: found.days,
    leadMeanDays: found.leadMeanDays,
    reviewDays: found.reviewDays,
    countedAt: moment.countedAt.toISOString(),
    firstOrderBy: iso(found.firstOrderBy),
    firstArrival: iso(found.firstArrival),
    nextOrderBy: iso(found.nextOrderBy),
    nextArrival: iso(found.nextArrival),
  }
}

/** Last moment to order from now on, and when that order comes. */
export function orderWindow(
  supplier: SupplierTimes,
  zone: string,
  now: Date,
  times?: Pick<PlaceTimes, 'supplier' | 'ward'>,
): { firstOrderBy: Date; firstArrival: Date } {
  const calendar = calendarOf(supplier, zone, times)
  if ('leadDays' in calendar)
    return { firstOrderBy: now, firstArrival: new Date(now.getTime() + calendar.leadDays * 86_400_000) }
  const slot = nextSlot(calendar, now.getTime())
  return { firstOrderBy: new Date(slot), firstArrival: new Date(arrivalOf(calendar, slot)) }
}

/** When an order sent at this moment comes. */
export const arrivalIfOrderedAt = (
  supplier: SupplierTimes,
  zone: string,
  at: Date,
  times?: Pick<PlaceTimes, 'supplier' | 'ward'>,
): Date => orderWindow(supplier, zone, at, times).firstArrival
