import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { arrivalOf, nextSlot, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { protectionInterval } from '#shared/calendar/protection-interval.ts'

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
  expected: {
    order_now_slot: string
    arrival: string
    next_slot: string
    next_arrival: string
    protection_days: number
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
    expect(shown(found.firstOrderBy)).toBe(row.expected.order_now_slot)
    expect(shown(found.firstArrival)).toBe(row.expected.arrival)
    expect(shown(found.nextOrderBy)).toBe(row.expected.next_slot)
    expect(shown(found.nextArrival)).toBe(row.expected.next_arrival)
    expect(found.days).toBeCloseTo(row.expected.protection_days, 6)
  })

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
