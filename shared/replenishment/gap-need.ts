import { DateTime } from 'luxon'
import { holidayGaps, type HolidayGap } from '#shared/calendar/holiday-gap.ts'
import { arrivalOf, nextSlot, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

const dayMs = 86_400_000
/** A gap is spoken of from so long before its last order. Our choice. */
export const gapAheadDays = 10
/** Closed dates further ahead than this belong to no gap that is near: slots ahead, lead time and the gap itself. */
const farDays = 90

/**
 * The next holiday gap whose last order is still to come and at most ten days ahead; null when there is none.
 *
 * @param now epoch ms
 * @throws {RangeError} when the calendar has no slot or no delivery day within a year
 */
export function gapOf(calendar: OrderCalendar, now: number): HolidayGap | null {
  if (!hasClosedDates(calendar, now)) return null
  const until = now + gapAheadDays * dayMs
  // The arrival of the first slot after the ten days is later than that of any within them.
  const gaps = holidayGaps(calendar, now, arrivalOf(calendar, nextSlot(calendar, until, true)))
  return gaps.find((gap) => gap.lastOrderBy >= now && gap.lastOrderBy <= until) ?? null
}

function hasClosedDates(calendar: OrderCalendar, now: number): boolean {
  const today = DateTime.fromMillis(now, { zone: calendar.zone })
  const from = today.toISODate() ?? ''
  const to = today.plus({ days: farDays }).toISODate() ?? ''
  const isNear = (date: string): boolean => date >= from && date <= to
  return [...calendar.holidays].some(isNear) || [...(calendar.closedToDeliveries ?? [])].some(isNear)
}

/**
 * Units that should stand at a place, position counted, so that it lasts at its own aim from its last count until the
 * first delivery after a gap. An estimate.
 *
 * The place's own calculation with its protection interval stretched to that delivery: lead time and the times seen of
 * deliveries stay, the review period grows; activity over the added days is taken like that over the interval before.
 * A shelf that is too small does not lower the need. 0 where there is nothing to learn from.
 *
 * @param input a stored policy input
 * @param countedAt moment of the last count, epoch ms
 * @param arrival first delivery after the gap, epoch ms
 */
export function neededOver(input: PolicyInput, countedAt: number, arrival: number): number {
  const lead = input.leadTime.meanDays
  const before = lead + (input.reviewPeriodDays ?? 0)
  const days = Math.max(before, (arrival - countedAt) / dayMs)
  const exposure = input.protectionExposureDays
  return (
    reorderPoint({
      ...input,
      reviewPeriodDays: days - lead,
      protectionExposureDays: exposure == null || before === 0 ? exposure : (exposure * days) / before,
      capacity: null,
    }).reorderPoint ?? 0
  )
}
