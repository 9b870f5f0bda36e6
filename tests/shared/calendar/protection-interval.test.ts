import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { arrivalOf, nextSlot, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { protectionInterval } from '#shared/calendar/protection-interval.ts'
import { exposureOf } from '#shared/demand/activity.ts'

// 35 dated cases made with R 4.2.2 and derived again by an independent Python program; see the file's own header.
interface Row {
  id: number
  tag: string
  now: string
  next_count: string | null
  order_slots: { dow: number; cutoff: string }[]
  lead: {
    kind: 'business' | 'calendar'
    days: number
    working_days: number[]
    delivery_days: number[] | number
    delivery_time: string
  }
  holidays: string[]
  weekday_weights_mon_to_sun: number[]
  expected: {
    order_now_slot: string
    arrival: string
    next_slot: string
    next_arrival: string
    lead_days_from_now: number
    protection_days: number
    weighted_protection_days: number
  }
}
const { rows } = JSON.parse(readFileSync(new URL('../../fixtures/stats/calendar.json', import.meta.url), 'utf8')) as {
  rows: Row[]
}

const dayMs = 86_400_000
const ms = (text: string): number => Date.parse(`${text}:00Z`)
const shown = (at: number): string => new Date(at).toISOString().slice(0, 16)

const calendarOf = (row: Row): OrderCalendar => ({
  zone: 'utc',
  slots: row.order_slots.map((s) => ({ weekday: s.dow, cutOff: s.cutoff })),
  lead: { kind: row.lead.kind === 'business' ? 'working' : 'calendar', days: row.lead.days },
  workingDays: row.lead.working_days,
  arrivalDays: [row.lead.delivery_days].flat(),
  arrivalTime: row.lead.delivery_time,
  holidays: new Set(row.holidays),
})

describe('protectionInterval', () => {
  it.each(rows)('follows the dated case $id, $tag', (row) => {
    const now = ms(row.now)
    const found = protectionInterval(calendarOf(row), {
      countedAt: now,
      asOf: now,
      rhythmDays: row.next_count === null ? 0 : (ms(row.next_count) - now) / dayMs,
    })
    const weekday = row.weekday_weights_mon_to_sun
    const { days } = exposureOf({ zone: 'utc', weekday, changes: [] }).between(now, found.nextArrival)
    const close = (figure: number): unknown => expect.closeTo(figure, 9)
    // Each field of the case, none left out.
    expect(row.expected).toStrictEqual({
      order_now_slot: shown(found.firstOrderBy),
      arrival: shown(found.firstArrival),
      next_slot: shown(found.nextOrderBy),
      next_arrival: shown(found.nextArrival),
      lead_days_from_now: close((found.firstArrival - now) / dayMs),
      protection_days: close(found.days),
      weighted_protection_days: close(days),
    })
  })

  it('has all 35 cases', () => expect(rows).toHaveLength(35))

  const stores: OrderCalendar = {
    zone: 'Europe/London',
    slots: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, cutOff: '10:00' })),
    lead: { kind: 'working', days: 1 },
    workingDays: [1, 2, 3, 4, 5],
    arrivalDays: [1, 2, 3, 4, 5],
    arrivalTime: '14:00',
    holidays: new Set(),
  }

  it('stands still until the planned count and then grows slot by slot', () => {
    const countedAt = Date.parse('2026-11-02T09:00:00Z')
    const at = (hours: number): number =>
      protectionInterval(stores, { countedAt, asOf: countedAt + hours * 3_600_000, rhythmDays: 3 }).days
    expect(at(0)).toBe(at(48))
    expect(at(72 + 2)).toBeGreaterThan(at(72))
    expect(at(24 * 9)).toBeGreaterThan(at(24 * 5))
  })

  it('keeps wall time over the change to summer time and subtracts in UTC', () => {
    // 28 March 2027 is the last Sunday of March: the clocks go forward.
    const friday = nextSlot(stores, Date.parse('2027-03-26T09:00:00Z'))
    expect(new Date(friday).toISOString()).toBe('2027-03-26T10:00:00.000Z')
    expect(new Date(arrivalOf(stores, friday)).toISOString()).toBe('2027-03-29T13:00:00.000Z')
  })

  it('without a calendar orders at once and counts plain days', () => {
    const countedAt = Date.parse('2026-11-02T09:00:00Z')
    const found = protectionInterval({ leadDays: 2.5 }, { countedAt, asOf: countedAt, rhythmDays: 1 })
    expect(found).toMatchObject({ days: 3.5, leadMeanDays: 2.5, reviewDays: 1, firstOrderBy: countedAt })
  })

  it('waits with a planned count for a day on which the room counts', () => {
    // Friday 09:00, next day's count: nobody counts at the weekend or on that Monday, so it is Tuesday's.
    const countedAt = Date.parse('2026-11-06T09:00:00Z')
    const moment = { countedAt, asOf: countedAt, rhythmDays: 1 }
    const counting = { zone: 'Europe/London', weekdays: [1, 2, 3, 4, 5], closed: new Set(['2026-11-09']) }
    const found = protectionInterval(stores, { ...moment, counting })
    expect(new Date(found.nextOrderBy).toISOString()).toBe('2026-11-10T10:00:00.000Z')
    expect(new Date(found.nextArrival).toISOString()).toBe('2026-11-11T14:00:00.000Z')
    expect(found.days).toBeCloseTo(5 + 5 / 24, 9)
    expect(protectionInterval(stores, moment).days).toBeCloseTo(4 + 5 / 24, 9)
  })

  it('brings goods when the ward takes deliveries again; order days and lead stay', () => {
    const slot = Date.parse('2026-11-02T10:00:00Z')
    const closed = { ...stores, closedToDeliveries: new Set(['2026-11-03', '2026-11-04']) }
    expect(new Date(arrivalOf(closed, slot)).toISOString()).toBe('2026-11-05T14:00:00.000Z')
    expect(nextSlot(closed, Date.parse('2026-11-03T09:00:00Z'))).toBe(Date.parse('2026-11-03T10:00:00Z'))
    // Two working days are Wednesday, closed or not; not one of them more.
    const twoDays = { ...closed, lead: { kind: 'working' as const, days: 2 } }
    expect(new Date(arrivalOf(twoDays, slot)).toISOString()).toBe('2026-11-05T14:00:00.000Z')
  })

  it('says so when a calendar has no order day', () => {
    expect(() => nextSlot({ ...stores, slots: [] }, 0)).toThrow(RangeError)
  })

  it('says so when a calendar has no working or delivery day', () => {
    const slot = nextSlot(stores, Date.parse('2026-11-02T09:00:00Z'))
    expect(() => arrivalOf({ ...stores, workingDays: [] }, slot)).toThrow(RangeError)
    expect(() => arrivalOf({ ...stores, arrivalDays: [] }, slot)).toThrow(RangeError)
  })

  it('never lets an order arrive before its own cut-off', () => {
    const evening = { ...stores, slots: [{ weekday: 1, cutOff: '16:00' }], lead: { kind: 'working' as const, days: 0 } }
    const monday = nextSlot(evening, Date.parse('2026-11-02T09:00:00Z'))
    expect(new Date(arrivalOf(evening, monday)).toISOString()).toBe('2026-11-03T14:00:00.000Z')
  })

  it('takes an order exactly at the cut-off as in time, a millisecond later as the next one', () => {
    const cutOff = Date.parse('2026-11-02T10:00:00Z')
    expect(nextSlot(stores, cutOff)).toBe(cutOff)
    expect(nextSlot(stores, cutOff + 1)).toBe(cutOff + 86_400_000)
    expect(nextSlot(stores, cutOff, true)).toBe(cutOff + 86_400_000)
  })

  it('never shrinks as an overdue count waits, and covers both parts it is made of', () => {
    const countedAt = Date.parse('2027-03-22T09:00:00Z')
    let last = 0
    for (let hours = 0; hours < 24 * 21; hours += 5) {
      const found = protectionInterval(stores, { countedAt, asOf: countedAt + hours * 3_600_000, rhythmDays: 2.5 })
      expect(found.days).toBeGreaterThanOrEqual(last)
      expect(found.days).toBeCloseTo(found.leadMeanDays + found.reviewDays, 9)
      expect(found.nextOrderBy).toBeGreaterThan(found.firstOrderBy)
      last = found.days
    }
  })

  it('is quick enough for every bin of a hospital', () => {
    const countedAt = Date.parse('2027-03-22T09:00:00Z')
    const began = performance.now()
    for (let bin = 0; bin < 300; bin++)
      protectionInterval(stores, { countedAt: countedAt + bin * 60_000, asOf: countedAt + 86_400_000, rhythmDays: 7 })
    expect(performance.now() - began).toBeLessThan(2000)
  })
})
