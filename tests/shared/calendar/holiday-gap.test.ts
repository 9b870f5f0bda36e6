import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  holidayGaps,
  orderForReopening,
  remainingSlots,
  spreadOverSlots,
  type Need,
} from '#shared/calendar/holiday-gap.ts'
import type { OrderCalendar } from '#shared/calendar/order-calendar.ts'

const ms = (text: string): number => Date.parse(`${text}:00Z`)
const shown = (at: number): string => new Date(at).toISOString().slice(0, 16)
const weekdays = [1, 2, 3, 4, 5]

/** Orders Monday to Friday until 10:00, there on the next working day at 14:00. */
const daily = (...holidays: string[]): OrderCalendar => ({
  zone: 'Europe/London',
  slots: weekdays.map((weekday) => ({ weekday, cutOff: '10:00' })),
  lead: { kind: 'working', days: 1 },
  workingDays: weekdays,
  arrivalDays: weekdays,
  arrivalTime: '14:00',
  holidays: new Set(holidays),
})
const weekly = (...holidays: string[]): OrderCalendar => ({
  ...daily(...holidays),
  slots: [{ weekday: 2, cutOff: '12:00' }],
  lead: { kind: 'working', days: 2 },
})

describe('holidayGaps', () => {
  it('finds the long stretch over two holidays and the orders on both sides of it', () => {
    // Friday 25 and Monday 28 December: an order of Thursday 24 comes on Tuesday 29.
    const [gap, ...more] = holidayGaps(
      daily('2026-12-25', '2026-12-28'),
      ms('2026-12-14T08:00'),
      ms('2027-01-10T08:00'),
    )
    expect(more).toEqual([])
    expect(gap).toMatchObject({ from: '2026-12-25', to: '2026-12-28', dates: ['2026-12-25', '2026-12-28'], days: 5 })
    expect(shown(gap!.lastOrderBy)).toBe('2026-12-23T10:00')
    expect(shown(gap!.lastArrival)).toBe('2026-12-24T14:00')
    expect(shown(gap!.nextOrderBy)).toBe('2026-12-24T10:00')
    expect(shown(gap!.nextArrival)).toBe('2026-12-29T14:00')
  })

  it('tells two gaps in a row apart, and leaves out those that are over or too far ahead', () => {
    const calendar = daily('2026-12-25', '2026-12-28', '2027-01-01')
    const starts = (from: string, to: string): string[] =>
      holidayGaps(calendar, ms(from), ms(to)).map((gap) => gap.from)
    expect(starts('2026-12-14T08:00', '2027-01-10T08:00')).toEqual(['2026-12-25', '2027-01-01'])
    expect(starts('2026-12-26T08:00', '2027-01-10T08:00')).toEqual(['2026-12-25', '2027-01-01'])
    expect(starts('2026-12-29T15:00', '2027-01-10T08:00')).toEqual(['2027-01-01'])
    expect(starts('2026-12-14T08:00', '2026-12-24T13:00')).toEqual([])
  })

  it('is not fooled by a change of the clocks, either way', () => {
    expect(holidayGaps(daily(), ms('2026-09-01T08:00'), ms('2027-05-01T08:00'))).toEqual([])
    // Easter 2027 with the clocks going forward on the Sunday: 119 hours.
    const [gap] = holidayGaps(daily('2027-03-26', '2027-03-29'), ms('2027-03-01T08:00'), ms('2027-04-10T08:00'))
    expect(gap!.days).toBeCloseTo(119 / 24, 9)
  })

  it('makes nothing of a holiday that lengthens no ordinary stretch', () => {
    // A Wednesday off: Tuesday to Thursday is shorter than a weekend.
    expect(holidayGaps(daily('2026-11-11'), ms('2026-11-01T08:00'), ms('2026-11-30T08:00'))).toEqual([])
  })

  it('sees an order day that falls away, however long before the arrival it would have brought', () => {
    const [gap] = holidayGaps(weekly('2026-11-10'), ms('2026-11-01T08:00'), ms('2026-11-30T08:00'))
    expect(gap).toMatchObject({ dates: ['2026-11-10'], days: 14 })
    expect(shown(gap!.lastOrderBy)).toBe('2026-11-03T12:00')
    expect(shown(gap!.nextArrival)).toBe('2026-11-19T14:00')
  })

  it('takes a ward that accepts no delivery as closed', () => {
    const closed = { ...daily(), closedToDeliveries: new Set(['2026-11-16', '2026-11-17']) }
    const [gap] = holidayGaps(closed, ms('2026-11-01T08:00'), ms('2026-11-30T08:00'))
    expect(gap).toMatchObject({ from: '2026-11-16', to: '2026-11-17', days: 5 })
    expect(shown(gap!.nextArrival)).toBe('2026-11-18T14:00')
  })
})

describe('remainingSlots', () => {
  it('lists the cut-offs from one moment to another, both included, holidays left out', () => {
    const calendar = daily('2026-11-11')
    expect(remainingSlots(calendar, ms('2026-11-09T10:00'), ms('2026-11-13T10:00')).map(shown)).toEqual([
      '2026-11-09T10:00',
      '2026-11-10T10:00',
      '2026-11-12T10:00',
      '2026-11-13T10:00',
    ])
    expect(remainingSlots(calendar, ms('2026-11-09T10:01'), ms('2026-11-10T09:59'))).toEqual([])
    expect(remainingSlots(calendar, 2, 1)).toEqual([])
  })
})

describe('spreadOverSlots', () => {
  const need = (id: string, urgency: number, fitsNow = true): Need => ({ id, urgency, fitsNow })

  it('puts the most urgent first and evens out the rest', () => {
    const needs = [need('a', 1), need('b', 5), need('c', 3), need('d', 4), need('e', 2)]
    const found = spreadOverSlots(needs, [30, 10, 20])
    expect(Object.fromEntries(found)).toEqual({ b: 10, d: 10, c: 20, e: 20, a: 30 })
  })

  it('lets what does not fit yet wait for the latest slot, and counts it there', () => {
    const needs = [need('a', 9, false), need('b', 8, false), need('c', 3), need('d', 2), need('e', 1)]
    expect(Object.fromEntries(spreadOverSlots(needs, [10, 20]))).toEqual({ a: 20, b: 20, c: 10, d: 10, e: 10 })
  })

  it('forgets nobody, keeps the order of urgency, and differs by one at most where nothing waits', () => {
    const any = fc.array(fc.record({ urgency: fc.integer({ min: 0, max: 9 }), fitsNow: fc.boolean() }), {
      maxLength: 40,
    })
    fc.assert(
      fc.property(any, fc.integer({ min: 1, max: 6 }), (rows, slots) => {
        const needs = rows.map((row, i) => ({ id: `n${i}`, ...row }))
        const times = Array.from({ length: slots }, (_, i) => i)
        const found = spreadOverSlots(needs, times)
        const loads = times.map((time) => [...found.values()].filter((at) => at === time).length)
        const waiting = needs.filter((n) => !n.fitsNow)
        expect(found.size).toBe(needs.length)
        for (const n of waiting) expect(found.get(n.id)).toBe(slots - 1)
        if (waiting.length <= Math.floor(needs.length / slots))
          expect(Math.max(...loads) - Math.min(...loads)).toBeLessThanOrEqual(1)
        const ready = needs.filter((n) => n.fitsNow)
        for (const x of ready)
          for (const y of ready)
            if (x.urgency > y.urgency) expect(found.get(x.id)).toBeLessThanOrEqual(found.get(y.id)!)
      }),
    )
  })

  it('says so when no slot is left', () => {
    expect(spreadOverSlots([], [])).toEqual(new Map())
    expect(() => spreadOverSlots([need('a', 1)], [])).toThrow(RangeError)
  })
})

describe('orderForReopening', () => {
  it('is the last order that is there when the ward opens again', () => {
    // Opens Monday 08:00: Thursday's order came on Friday, Friday's comes on Monday afternoon.
    const found = orderForReopening(daily(), ms('2026-11-16T08:00'))
    expect(shown(found!.orderBy)).toBe('2026-11-12T10:00')
    expect(shown(found!.arrives)).toBe('2026-11-13T14:00')
    expect(shown(orderForReopening(daily(), ms('2026-11-16T14:00'))!.orderBy)).toBe('2026-11-13T10:00')
  })

  it('looks behind holidays, and says when there is none', () => {
    expect(shown(orderForReopening(daily('2026-12-25', '2026-12-28'), ms('2026-12-29T08:00'))!.orderBy)).toBe(
      '2026-12-23T10:00',
    )
    expect(orderForReopening({ ...daily(), slots: [] }, ms('2026-11-16T08:00'))).toBeNull()
  })
})
