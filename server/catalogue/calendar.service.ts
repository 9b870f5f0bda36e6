import { arrivalOf, nextSlot, type OpenCalendar, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { protectionInterval, type ProtectionInterval } from '#shared/calendar/protection-interval.ts'

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

/** A supplier's calendar; without a cut-off it takes orders at every moment. */
export function calendarOf(supplier: SupplierTimes | null, zone: string): OrderCalendar | OpenCalendar {
  if (!supplier) return { leadDays: unknownLeadDays }
  if (!supplier.cutOff) return { leadDays: supplier.leadTimeDays ?? supplier.leadWorkingDays }
  return {
    zone,
    slots: weekdays(supplier.orderDays).map((weekday) => ({ weekday, cutOff: supplier.cutOff })),
    lead: { kind: 'working', days: supplier.leadWorkingDays },
    workingDays,
    arrivalDays: weekdays(supplier.arrivalDays),
    arrivalTime: supplier.arrivalTime,
    holidays: new Set(),
  }
}

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
): Protection {
  const found = protectionInterval(calendarOf(supplier, zone), {
    countedAt: moment.countedAt.getTime(),
    asOf: moment.asOf.getTime(),
    rhythmDays: moment.rhythmDays,
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
): { firstOrderBy: Date; firstArrival: Date } {
  const calendar = calendarOf(supplier, zone)
  if ('leadDays' in calendar)
    return { firstOrderBy: now, firstArrival: new Date(now.getTime() + calendar.leadDays * 86_400_000) }
  const slot = nextSlot(calendar, now.getTime())
  return { firstOrderBy: new Date(slot), firstArrival: new Date(arrivalOf(calendar, slot)) }
}

/** When an order sent at this moment comes. */
export const arrivalIfOrderedAt = (supplier: SupplierTimes, zone: string, at: Date): Date =>
  orderWindow(supplier, zone, at).firstArrival
