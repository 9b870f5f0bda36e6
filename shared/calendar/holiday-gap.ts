import { DateTime } from 'luxon'
import { arrivalOf, nextSlot, slotsOn, type OrderCalendar } from './order-calendar.ts'

/** A stretch without deliveries longer than any of an ordinary week. Moments in epoch ms. */
export interface HolidayGap {
  /** First and last local date on which the calendar is closed because of it. */
  from: string
  to: string
  /** Every closed date that bears on it, oldest first. */
  dates: string[]
  /** Last order that comes before it, and when it comes. */
  lastOrderBy: number
  lastArrival: number
  /** The next order after that, and when it comes: the first arrival after the gap. */
  nextOrderBy: number
  nextArrival: number
  /** From the last arrival before to the first after it. */
  days: number
}

interface Slot {
  orderBy: number
  arrives: number
}

const dayMs = 86_400_000
const searchDays = 366
/** Within so many days of an ordinary calendar every pair of neighbouring slots of a week comes up. */
const ordinaryDays = 14

/**
 * The gaps between two moments: where holidays, or dates on which the ward takes no delivery, put two neighbouring
 * arrivals further apart than the longest stretch of an ordinary week without any. Compared by wall time, so that a
 * change of the clocks makes no gap.
 *
 * @param from epoch ms; a gap counts when the first arrival after it is later
 * @param to epoch ms; a gap counts when the last arrival before it is not later
 * @throws {RangeError} when the calendar has no slot or no delivery day within a year
 */
export function holidayGaps(calendar: OrderCalendar, from: number, to: number): HolidayGap[] {
  const ordinary = longestOrdinary(calendar)
  const gaps: HolidayGap[] = []
  let last = slotBefore(calendar, from)
  while (last.arrives <= to) {
    const next = slotAt(calendar, last.orderBy, true)
    if (next.arrives > from && wallDays(calendar.zone, last.arrives, next.arrives) > ordinary) {
      const gap = gapBetween(calendar, last, next)
      if (gap) gaps.push(gap)
    }
    last = next
  }
  return gaps
}

function slotAt(calendar: OrderCalendar, from: number, after = false): Slot {
  const orderBy = nextSlot(calendar, from, after)
  return { orderBy, arrives: arrivalOf(calendar, orderBy) }
}

/** A slot whose order is there by a moment, not long before it; one of a year ago where none comes that early. */
function slotBefore(calendar: OrderCalendar, moment: number): Slot {
  for (let back = 7 + 2 * calendar.lead.days; ; back *= 2) {
    const slot = slotAt(calendar, moment - back * dayMs)
    if (slot.arrives <= moment || back > searchDays) return slot
  }
}

const wallDays = (zone: string, from: number, to: number): number => {
  const wall = (moment: number): number =>
    DateTime.fromMillis(moment, { zone }).setZone('utc', { keepLocalTime: true }).toMillis()
  return (wall(to) - wall(from)) / dayMs
}

/** Longest stretch between two arrivals when nothing is closed. */
function longestOrdinary(calendar: OrderCalendar): number {
  const open = { ...calendar, zone: 'utc', holidays: new Set<string>(), closedToDeliveries: new Set<string>() }
  let longest = 0
  let last = slotAt(open, 0)
  while (last.orderBy < ordinaryDays * dayMs) {
    const next = slotAt(open, last.orderBy, true)
    longest = Math.max(longest, (next.arrives - last.arrives) / dayMs)
    last = next
  }
  return longest
}

/** Null when no closed date lies between the last order before and the first arrival after. */
function gapBetween(calendar: OrderCalendar, last: Slot, next: Slot): HolidayGap | null {
  const dates: string[] = []
  const local = (moment: number): DateTime => DateTime.fromMillis(moment, { zone: calendar.zone })
  for (let day = local(last.orderBy).startOf('day'); day <= local(next.arrives); day = day.plus({ days: 1 })) {
    const date = day.toISODate() ?? ''
    const isAfter = day > local(last.arrives)
    // Before the last arrival only a holiday that took an order day away can have made the gap.
    const isHoliday = calendar.holidays.has(date) && (isAfter || calendar.slots.some((s) => s.weekday === day.weekday))
    if (isHoliday || (isAfter && calendar.closedToDeliveries?.has(date))) dates.push(date)
  }
  if (dates.length === 0) return null
  return {
    from: dates[0]!,
    to: dates.at(-1)!,
    dates,
    lastOrderBy: last.orderBy,
    lastArrival: last.arrives,
    nextOrderBy: next.orderBy,
    nextArrival: next.arrives,
    days: (next.arrives - last.arrives) / dayMs,
  }
}

/**
 * Cut-offs from one moment to another, both included, earliest first.
 *
 * @param from epoch ms
 * @param until epoch ms
 */
export function remainingSlots(calendar: OrderCalendar, from: number, until: number): number[] {
  const slots: number[] = []
  for (
    let day = DateTime.fromMillis(from, { zone: calendar.zone }).startOf('day');
    day.toMillis() <= until;
    day = day.plus({ days: 1 })
  )
    slots.push(...slotsOn(calendar, day).filter((slot) => slot >= from && slot <= until))
  return slots
}

/** One need before a gap; the higher the urgency, the sooner it is ordered. */
export interface Need {
  id: string
  urgency: number
  /** Whether its shelf can take it now; else it waits for the latest slot, when more has been used. */
  fitsNow: boolean
}

/**
 * Which need goes with which slot, so that the store is not asked for everything on the last day. Our choice: what its
 * shelf cannot take now goes with the latest slot; the rest, most urgent first (ties by id), fills the slots from the
 * earliest on, and each slot takes its even share. Loads differ by one at most, unless what has to wait alone is more
 * than a share.
 *
 * @param slots epoch ms, in any order
 * @throws {RangeError} when there are needs and no slot
 */
export function spreadOverSlots(needs: readonly Need[], slots: readonly number[]): Map<string, number> {
  if (needs.length === 0) return new Map()
  if (slots.length === 0) throw new RangeError('no order slot is left before the gap')
  const inOrder = [...slots].sort((a, b) => a - b)
  const latest = inOrder.at(-1)!
  const waiting = needs.filter((need) => !need.fitsNow)
  const ready = needs
    .filter((need) => need.fitsNow)
    .sort((a, b) => b.urgency - a.urgency || (a.id < b.id ? -1 : a.id > b.id ? 1 : 0))
  const shares = evenShares(ready.length, inOrder.length, waiting.length)
  const chosen = new Map(waiting.map((need) => [need.id, latest]))
  let slot = 0
  for (const need of ready) {
    while (shares[slot] === 0) slot += 1
    shares[slot]! -= 1
    chosen.set(need.id, inOrder[slot]!)
  }
  return chosen
}

/** How many of the ready needs each slot takes when the latest one holds the waiting ones already. */
function evenShares(ready: number, slots: number, waiting: number): number[] {
  const loads = Array.from({ length: slots }, (_, i) => (i === slots - 1 ? waiting : 0))
  const shares = loads.map(() => 0)
  for (let given = 0; given < ready; given += 1) {
    const least = loads.indexOf(Math.min(...loads))
    loads[least]! += 1
    shares[least]! += 1
  }
  return shares
}

/**
 * The last order that is there when a closed ward opens again.
 *
 * @param reopensAt epoch ms
 * @returns the slot and its arrival in epoch ms; null when none within a year before comes in time
 * @throws {RangeError} when the calendar has no delivery day within a year
 */
export function orderForReopening(
  calendar: OrderCalendar,
  reopensAt: number,
): { orderBy: number; arrives: number } | null {
  const last = DateTime.fromMillis(reopensAt, { zone: calendar.zone }).startOf('day')
  for (let back = 0; back <= searchDays; back += 1) {
    for (const orderBy of slotsOn(calendar, last.minus({ days: back })).reverse()) {
      const arrives = arrivalOf(calendar, orderBy)
      if (arrives <= reopensAt) return { orderBy, arrives }
    }
  }
  return null
}
