import { DateTime } from 'luxon'
import { describe, expect, it } from 'vitest'
import { exposureOf } from '#shared/demand/activity.ts'
import { fitWeekdays, weekdayProfile, type ProfileUse, type WeekdayUse } from '#shared/demand/weekday-profile.ts'
import { drawInteger, seededRandom } from '#shared/kernel/random.ts'
import { drawGamma, drawNegativeBinomial } from '#shared/kernel/random-laws.ts'

const zone = 'Europe/London'
const dayMs = 86_400_000
/** A Monday. */
const start = DateTime.fromISO('2026-01-05T09:00', { zone }).toMillis()
/** So little that the maximum likelihood shows; the information of the data is many orders larger. */
const almostNothing = 1e-7

/** A weekend dip of 40 %: 5 a + 2 · 0.6 a = 7. */
const weekday = 7 / 6.2
const dip = [weekday, weekday, weekday, weekday, weekday, 0.6 * weekday, 0.6 * weekday]

/** A simulated ward: items counted every day to every third, use by the true weights, variance-to-mean ratio 2. */
function ward(seed: string, items: number, counts: number, weights: readonly number[]): ProfileUse[][] {
  const random = seededRandom(seed)
  const exposure = exposureOf({ zone, weekday: weights, changes: [] })
  return Array.from({ length: items }, () => {
    const perDay = drawGamma(random, 1, 3)
    let at = start
    return Array.from({ length: counts }, () => {
      const from = at
      at += (drawInteger(random, 0, 2) + 0.5 + random()) * dayMs
      return { from, to: at, quantity: drawNegativeBinomial(random, perDay * exposure.between(from, at).days, 2) }
    })
  })
}

describe('the weights of weekdays', () => {
  it('are the shares of use where each day is counted by itself, whatever each item uses', () => {
    // Closed form: with every day of the week once in each bin, g_d is in proportion to all use on day d.
    const one = (day: number, quantity: number): WeekdayUse => ({
      quantity,
      days: [0, 1, 2, 3, 4, 5, 6].map((d) => (d === day ? 1 : 0)),
    })
    const fast = [30, 28, 26, 27, 29, 10, 4].map((quantity, day) => one(day, quantity))
    const slow = [3, 1, 2, 3, 1, 0, 2].map((quantity, day) => one(day, quantity))
    const all = [33, 29, 28, 30, 30, 10, 6]
    const found = fitWeekdays([fast, slow], almostNothing)
    found.forEach((weight, day) => expect(weight).toBeCloseTo((7 * all[day]!) / 166, 6))
  })

  it('are known for weekdays and weekends from intervals over each', () => {
    // Closed form: five days with 60 units, two with 12: 12 a day against 6 a day, so 7 · 2 ÷ 12 and half of it.
    const week: WeekdayUse[] = [
      { quantity: 60, days: [1, 1, 1, 1, 1, 0, 0] },
      { quantity: 12, days: [0, 0, 0, 0, 0, 1, 1] },
    ]
    const found = fitWeekdays([week, week], almostNothing)
    found.forEach((weight, day) => expect(weight).toBeCloseTo(day < 5 ? 7 / 6 : 7 / 12, 6))
  })

  it('are drawn towards 1 by what the prior weighs', () => {
    // Two groups of one day each would be 40 against 20; a prior that outweighs them leaves no difference.
    const days: WeekdayUse[] = [40, 20, 30, 30, 30, 30, 30].map((quantity, day) => ({
      quantity,
      days: [0, 1, 2, 3, 4, 5, 6].map((d) => (d === day ? 1 : 0)),
    }))
    // Equal exposure a day: (x_d + prior) over its mean.
    fitWeekdays([days], 30).forEach((weight, day) => expect(weight).toBeCloseTo((days[day]!.quantity + 30) / 60, 6))
    fitWeekdays([days], 1e9).forEach((weight) => expect(weight).toBeCloseTo(1, 6))
  })

  // Over sixteen such wards a weight had a deviation of 0.07, and was 0.02 off at most in the mean.
  const deviation = 0.07
  const weekend = (weights: readonly number[]): number => (weights[5]! + weights[6]!) / 2

  it('find the profile of a simulated ward', () => {
    const found = weekdayProfile({ zone, bins: ward('weekend', 40, 60, dip) })
    found.forEach((weight, day) => expect(Math.abs(weight - dip[day]!)).toBeLessThan(3 * deviation))
    expect(Math.abs(weekend(found) - weekend(dip))).toBeLessThan(deviation)
    expect(found.reduce((sum, weight) => sum + weight, 0)).toBeCloseTo(7, 9)
  })

  it('find nothing in a ward without a profile', () => {
    const found = weekdayProfile({ zone, bins: ward('flat', 40, 60, [1, 1, 1, 1, 1, 1, 1]) })
    found.forEach((weight) => expect(Math.abs(weight - 1)).toBeLessThan(3 * deviation))
    expect(Math.abs(weekend(found) - 1)).toBeLessThan(deviation)
  })

  it('stay near 1 while there is little to go by', () => {
    const found = weekdayProfile({ zone, bins: [ward('little', 1, 20, dip)[0]!.map((u) => ({ ...u, quantity: 1 }))] })
    found.forEach((weight) => expect(Math.abs(weight - 1)).toBeLessThan(0.2))
  })

  it('are all 1 below twenty intervals, and where only whole weeks were counted', () => {
    const ones = [1, 1, 1, 1, 1, 1, 1]
    const bins = ward('weekend', 40, 60, dip)
    expect(weekdayProfile({ zone, bins: [bins[0]!.slice(0, 19)] })).toEqual(ones)
    expect(weekdayProfile({ zone, bins: [bins[0]!.slice(0, 20)] })).not.toEqual(ones)
    const uses = [9, 14, 3, 20, 11]
    const whole = Array.from({ length: 6 }, () =>
      uses.map((quantity, i) => ({ from: start + i * 7 * dayMs, to: start + (i + 1) * 7 * dayMs, quantity })),
    )
    expect(weekdayProfile({ zone, bins: whole })).toEqual(ones)
    expect(weekdayProfile({ zone, bins: [] })).toEqual(ones)
  })

  it('are not misled by a ward that was closed at weekends for a time', () => {
    // Counted Monday and Friday at 09:00 with 2 a day while open, closed on eight Saturdays and Sundays.
    const at = (week: number, day: number): number =>
      DateTime.fromMillis(start, { zone })
        .plus({ days: 7 * week + day })
        .toMillis()
    const midnight = (week: number, day: number): number =>
      DateTime.fromMillis(start, { zone })
        .startOf('day')
        .plus({ days: 7 * week + day })
        .toMillis()
    const weeks = Array.from({ length: 8 }, (_, week) => week)
    const changes = weeks.map((week) => ({
      id: `w${week}`,
      from: midnight(week, 5),
      to: midnight(week, 7),
      factor: 0,
      extraPerDay: 0,
      weekdays: [],
    }))
    const item = weeks.flatMap((week) => [
      { from: at(week, 0), to: at(week, 4), quantity: 8 },
      { from: at(week, 4), to: at(week, 7), quantity: 2 },
    ])
    const bins = [item, item]
    weekdayProfile({ zone, bins, changes }).forEach((weight) => expect(weight).toBeCloseTo(1, 6))
    expect(weekdayProfile({ zone, bins })[6]).toBeLessThan(0.9)
  })

  it('matter: without them a weekend dip of 40 % hides 11 % of what Monday to Thursday use', () => {
    // Statistics 4.12.
    const days = exposureOf({ zone, weekday: dip, changes: [] }).between(
      DateTime.fromISO('2026-11-02', { zone }).toMillis(),
      DateTime.fromISO('2026-11-06', { zone }).toMillis(),
    ).days
    expect(1 - 4 / days).toBeCloseTo(0.114, 3)
  })
})
