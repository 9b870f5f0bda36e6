import fc from 'fast-check'
import { DateTime } from 'luxon'
import { describe, expect, it } from 'vitest'
import { exposureOf, usualActivity, type Activity, type ActivityChange } from '#shared/demand/activity.ts'

const zone = 'Europe/London'
const dayMs = 86_400_000
const at = (text: string): number => DateTime.fromISO(text, { zone }).toMillis()
// A busy week with a quiet end: the weights of the dated calendar cases.
const weekday = [1.2, 1.15, 1.15, 1.1, 1.1, 0.7, 0.6]

let serial = 0
const change = (from: string, to: string | null, more: Partial<ActivityChange>): ActivityChange => {
  serial += 1
  return {
    id: `c${serial}`,
    from: at(from),
    to: to === null ? null : at(to),
    factor: 1,
    extraPerDay: 0,
    weekdays: [],
    ...more,
  }
}
const between = (activity: Activity, from: string, to: string) => exposureOf(activity).between(at(from), at(to))

describe('exposure', () => {
  it('is plain time with usual activity, over a change of the clocks as well', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1.7e12, max: 1.9e12 }), fc.integer({ min: 0, max: 1e11 }), (from, length) => {
        expect(exposureOf(usualActivity(zone)).between(from, from + length)).toEqual({
          days: length / dayMs,
          extraUnits: 0,
        })
      }),
    )
  })

  it('weighs each weekday by wall time', () => {
    const activity = { zone, weekday, changes: [] }
    // Wednesday 15:00 to Saturday 12:00: 9/24 of Wednesday, Thursday, Friday, half of Saturday.
    const found = between(activity, '2026-11-04T15:00', '2026-11-07T12:00')
    expect(found.days).toBeCloseTo(1.15 * 0.375 + 1.1 + 1.1 + 0.35, 12)
    expect(between(activity, '2026-11-02', '2026-11-30').days).toBeCloseTo(28, 10)
  })

  it('gives a local day of 23 or 25 hours the weight of one day, spread over its hours', () => {
    const activity = { zone, weekday, changes: [] }
    expect(between(activity, '2027-03-28', '2027-03-29').days).toBeCloseTo(0.6, 12)
    expect(between(activity, '2026-10-25', '2026-10-26').days).toBeCloseTo(0.6, 12)
    // From 12:00 on, 12 of the 23 hours are left.
    expect(between(activity, '2027-03-28T12:00', '2027-03-29').days).toBeCloseTo((0.6 * 12) / 23, 12)
  })

  it('multiplies changes that overlap and ends where they end', () => {
    const changes = [change('2026-11-02', null, { factor: 2 }), change('2026-11-04', '2026-11-06', { factor: 0.5 })]
    const activity = { ...usualActivity(zone), changes }
    // One day before, two at 2, two at 2 × 0.5, one at 2.
    expect(between(activity, '2026-11-01', '2026-11-07').days).toBeCloseTo(1 + 4 + 2 + 2, 12)
  })

  it('adds extra units on their weekdays, in proportion on a day cut short', () => {
    const lists = change('2026-11-02', '2026-11-16', { extraPerDay: 6, weekdays: [2, 4] })
    const visits = change('2026-11-03T12:00', '2026-11-04', { extraPerDay: 8 })
    const activity = { ...usualActivity(zone), changes: [lists, visits] }
    expect(between(activity, '2026-11-01', '2026-11-30').extraUnits).toBeCloseTo(4 * 6 + 4, 10)
    expect(between(activity, '2026-11-03', '2026-11-03T06:00')).toMatchObject({ days: 0.25, extraUnits: 1.5 })
    expect(between(activity, '2026-11-01', '2026-11-30').days).toBeCloseTo(29, 10)
  })

  it('knows no use in a closed time, planned extra units included', () => {
    const closed = change('2026-12-24', '2026-12-28', { factor: 0 })
    const cases = change('2026-12-21', '2027-01-01', { extraPerDay: 3 })
    const activity = { zone, weekday, changes: [closed, cases] }
    expect(between(activity, '2026-12-24', '2026-12-28')).toEqual({ days: 0, extraUnits: 0 })
    expect(between(activity, '2026-12-21', '2027-01-01').extraUnits).toBeCloseTo(7 * 3, 10)
  })

  it('adds up over neighbouring stretches, in whatever order they are asked', () => {
    const changes = [
      change('2026-03-10T09:00', '2026-05-01', { factor: 1.7, extraPerDay: 2 }),
      change('2026-04-02', '2026-04-07', { factor: 0 }),
    ]
    const moment = fc.integer({ min: at('2025-01-01'), max: at('2027-12-31') })
    fc.assert(
      fc.property(fc.tuple(moment, moment, moment), (moments) => {
        const [a = 0, b = 0, c = 0] = [...moments].sort((x, y) => x - y)
        const exposure = exposureOf({ zone, weekday, changes })
        const [second, first] = [exposure.between(b, c), exposure.between(a, b)]
        const whole = exposure.between(a, c)
        expect(first.days + second.days).toBeCloseTo(whole.days, 7)
        expect(first.extraUnits + second.extraUnits).toBeCloseTo(whole.extraUnits, 7)
        expect(whole.days).toBeGreaterThanOrEqual(0)
      }),
      { numRuns: 30 },
    )
  })

  it('serves the intervals of a ward from one table', () => {
    const exposure = exposureOf({ zone, weekday, changes: [change('2026-03-10', '2026-05-01', { factor: 1.7 })] })
    const start = at('2025-01-01')
    const began = performance.now()
    let days = 0
    for (let i = 0; i < 200_000; i += 1) days += exposure.between(start + i * 300_000, start + i * 300_000 + dayMs).days
    expect(days).toBeGreaterThan(200_000)
    expect(performance.now() - began).toBeLessThan(2000)
  })

  it('refuses what is no activity', () => {
    expect(() => exposureOf({ zone, weekday: [1, 1, 1], changes: [] })).toThrow(/seven figures/)
    expect(() => exposureOf({ zone, weekday: [2, 2, 2, 2, 2, 2, 2], changes: [] })).toThrow(/mean 1/)
    expect(() => exposureOf({ zone, weekday, changes: [change('2026-01-02', '2026-01-01', {})] })).toThrow(/ends after/)
    expect(() => exposureOf({ zone, weekday, changes: [change('2026-01-01', null, { factor: -1 })] })).toThrow(/0 or/)
    expect(() => exposureOf({ zone, weekday, changes: [] }).between(2, 1)).toThrow(RangeError)
    expect(() => exposureOf({ zone: 'Nowhere/Else', weekday, changes: [] }).between(1, 2)).toThrow(/no time zone/)
  })
})
