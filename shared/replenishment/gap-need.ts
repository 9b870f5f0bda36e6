import { DateTime } from 'luxon'
import { holidayGaps, type HolidayGap } from '#shared/calendar/holiday-gap.ts'
import { arrivalOf, nextSlot, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'

const dayMs = 86_400_000
/** A gap is spoken of from so long before its last order. Our choice. */
export const gapAheadDays = 10
/** From a last order on, the days within which the closed ones that make its gap begin, without the lead time. */
const withinDays = 14

/**
 * The next holiday gap whose last order is still to come and at most ten days ahead; null when there is none.
 *
 * @param now epoch ms
 * @throws {RangeError} when the calendar has no slot or no delivery day within a year
 */
export function gapOf(calendar: OrderCalendar, now: number): HolidayGap | null {
  const until = now + gapAheadDays * dayMs
  return gapsOfDay(calendar, now).find((gap) => gap.lastOrderBy >= now && gap.lastOrderBy <= until) ?? null
}

type Dates = ReadonlySet<string>
const noDates: Dates = new Set()
/** Gaps found already, by both sets of closed dates: in one run these are the same objects for every place. */
const known = new WeakMap<Dates, WeakMap<Dates, Map<string, HolidayGap[]>>>()

function gapsOfDay(calendar: OrderCalendar, now: number): HolidayGap[] {
  const { holidays, closedToDeliveries = noDates, ...rest } = calendar
  const day = Math.floor(now / dayMs)
  const key = JSON.stringify([day, rest])
  const byWard = known.get(holidays) ?? new WeakMap<Dates, Map<string, HolidayGap[]>>()
  const byDay = byWard.get(closedToDeliveries) ?? new Map<string, HolidayGap[]>()
  known.set(holidays, byWard.set(closedToDeliveries, byDay))
  const gaps = byDay.get(key) ?? findGaps(calendar, day * dayMs)
  byDay.set(key, gaps)
  return gaps
}

/** Every gap that is near at some moment of the day that begins then. */
function findGaps(calendar: OrderCalendar, from: number): HolidayGap[] {
  if (!hasClosedDates(calendar, from)) return []
  // The arrival of the first slot after that is later than any of those before.
  const beyond = nextSlot(calendar, from + (gapAheadDays + 1) * dayMs, true)
  return holidayGaps(calendar, from, arrivalOf(calendar, beyond))
}

function hasClosedDates(calendar: OrderCalendar, now: number): boolean {
  const today = DateTime.fromMillis(now, { zone: calendar.zone })
  const from = today.toISODate() ?? ''
  // Twice the lead: working days take in weekends.
  const to = today.plus({ days: gapAheadDays + 1 + withinDays + 2 * calendar.lead.days }).toISODate() ?? ''
  const isNear = (date: string): boolean => date >= from && date <= to
  return [...calendar.holidays].some(isNear) || [...(calendar.closedToDeliveries ?? noDates)].some(isNear)
}

/**
 * What should stand at a place, position counted, so that it lasts at its own aim from its last count until the first
 * delivery after a gap, as a calculation: its reorder point is the answer. An estimate.
 *
 * The place's own calculation with its protection interval stretched to that delivery: lead time and the times seen of
 * deliveries stay, the review period grows; activity over the added days is taken like that over the interval before.
 * A shelf that is too small does not lower the need.
 *
 * @param input a stored policy input
 * @param countedAt moment of the last count, epoch ms
 * @param arrival first delivery after the gap, epoch ms
 */
export function overGap(input: PolicyInput, countedAt: number, arrival: number): PolicyInput {
  const lead = input.leadTime.meanDays
  const before = lead + (input.reviewPeriodDays ?? 0)
  const days = Math.max(before, (arrival - countedAt) / dayMs)
  const exposure = input.protectionExposureDays
  return {
    ...input,
    reviewPeriodDays: days - lead,
    protectionExposureDays: exposure == null || before === 0 ? exposure : (exposure * days) / before,
    capacity: null,
  }
}

/** Units `overGap` comes to, never below a fixed minimum; 0 where there is nothing to learn from. */
export const neededUnits = (input: PolicyInput, computed: number | null): number =>
  Math.max(input.pinnedFloor ?? 0, computed ?? 0)
