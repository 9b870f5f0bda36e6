import { nextCountAt, type CountingCalendar } from './counting-calendar.ts'
import { arrivalOf, nextSlot, type OpenCalendar, type OrderCalendar } from './order-calendar.ts'

const dayMs = 86_400_000

/** From the last count to the next possible arrival but one. Epoch ms and days. */
export interface ProtectionInterval {
  /** P: from the count to the arrival of the order after the next one. */
  days: number
  /** arrival(o2) − o2. */
  leadMeanDays: number
  /** o2 − the count. */
  reviewDays: number
  firstOrderBy: number
  firstArrival: number
  nextOrderBy: number
  nextArrival: number
}

interface Moment {
  /** The last standing count. */
  countedAt: number
  /** The moment of the calculation. */
  asOf: number
  /** Days to expect between counts. */
  rhythmDays: number
  /** Days on which the room counts; every day without it. */
  counting?: CountingCalendar | null
}

/**
 * The stretch a shelf has to last when an order is decided on the last count: until the order after the next one
 * can be on the shelf. The count stands still; until the next planned count so does this interval, and once that is
 * overdue it grows slot by slot, so that the reorder point rises to meet the bin.
 *
 * c = last count, n = max(asOf, c + rhythm moved on to a counting day), o1 = first slot at or after asOf, o2 = first slot after o1 and not before n,
 * P = arrival(o2) − c. Source: the (R, S) review argument of Silver, Pyke & Thomas ch. 6 with dated slots;
 * daylight saving by wall time, differences in UTC.
 */
export function protectionInterval(calendar: OrderCalendar | OpenCalendar, moment: Moment): ProtectionInterval {
  const due = nextCountAt(moment.counting ?? null, moment.countedAt, moment.rhythmDays)
  const planned = Math.max(moment.asOf, due)
  const { first, next } = 'leadDays' in calendar ? openSlots(moment, planned) : datedSlots(calendar, moment, planned)
  const arrives = (slot: number): number =>
    'leadDays' in calendar ? slot + calendar.leadDays * dayMs : arrivalOf(calendar, slot)
  const nextArrival = arrives(next)
  return {
    days: (nextArrival - moment.countedAt) / dayMs,
    leadMeanDays: (nextArrival - next) / dayMs,
    reviewDays: (next - moment.countedAt) / dayMs,
    firstOrderBy: first,
    firstArrival: arrives(first),
    nextOrderBy: next,
    nextArrival,
  }
}

const openSlots = (moment: Moment, planned: number) => ({ first: moment.asOf, next: planned })

function datedSlots(calendar: OrderCalendar, moment: Moment, planned: number) {
  const first = nextSlot(calendar, moment.asOf)
  return { first, next: planned > first ? nextSlot(calendar, planned) : nextSlot(calendar, first, true) }
}
