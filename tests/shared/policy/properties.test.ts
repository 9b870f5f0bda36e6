import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { negativeBinomialLaw } from '#shared/policy/count-laws.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { negativeBinomialMass } from '#shared/stats/negative-binomial-mass.ts'

const double = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const runs = { numRuns: 60, seed: 1 }
const level = double(0.5, 0.9999)
const days = double(0.25, 30)
const history = fc.array(fc.record({ days: double(0.5, 14), quantity: fc.integer({ min: 0, max: 80 }) }), {
  ...{ minLength: 2, maxLength: 20 },
})
const rate = fc.record({ a: double(0.2, 30), b: double(0.2, 60) })
const point = (input: PolicyInput): number => reorderPoint(input).reorderPoint!

describe('a reorder point never falls', () => {
  const known = fc.record({ meanPerDay: double(0.01, 20), over: double(0, 8) })
  const knownInput = (meanPerDay: number, over: number, meanDays: number, serviceLevel: number): PolicyInput => ({
    demand: { meanPerDay, variancePerDay: meanPerDay * (1 + over) },
    leadTime: { meanDays },
    serviceLevel,
  })

  it('when known use, the time to cover or the aim rises', () => {
    fc.assert(
      fc.property(known, days, level, double(1, 1.5), double(0, 1), (use, meanDays, aim, more, closer) => {
        const { meanPerDay, over } = use
        const base = point(knownInput(meanPerDay, over, meanDays, aim))
        expect(point(knownInput(meanPerDay * more, over, meanDays, aim))).toBeGreaterThanOrEqual(base)
        expect(point(knownInput(meanPerDay, over, meanDays * more, aim))).toBeGreaterThanOrEqual(base)
        const higher = aim + closer * (0.9999 - aim)
        expect(point(knownInput(meanPerDay, over, meanDays, higher))).toBeGreaterThanOrEqual(base)
      }),
      runs,
    )
  })

  it('when like wards use more or more is thrown away, with counts and before the first', () => {
    fc.assert(
      fc.property(
        fc.oneof(history, fc.constant<{ days: number; quantity: number }[]>([])),
        rate,
        days,
        level,
        double(1, 3),
        (intervals, { a, b }, meanDays, aim, more) => {
          const input = (a: number, wastagePerDay = 0): PolicyInput => ({
            ...{ intervals, leadTime: { meanDays }, serviceLevel: aim, wastagePerDay },
            prior: { nu0: 8, w0: 1.5, rate: { a, b } },
          })
          const base = point(input(a))
          expect(point(input(a * more))).toBeGreaterThanOrEqual(base)
          expect(point(input(a, more))).toBeGreaterThanOrEqual(base)
        },
      ),
      runs,
    )
  })

  it('when every count was larger by the same share', () => {
    fc.assert(
      fc.property(history, days, level, fc.integer({ min: 2, max: 4 }), (intervals, meanDays, aim, times) => {
        const input = { intervals, leadTime: { meanDays }, serviceLevel: aim, method: 'negative-binomial' as const }
        const larger = intervals.map((interval) => ({ ...interval, quantity: interval.quantity * times }))
        expect(point({ ...input, intervals: larger })).toBeGreaterThanOrEqual(point(input))
      }),
      runs,
    )
  })
})

it('demand over two stretches is the sum of their demands: NB1 is additive in time (statistics, 2.2)', () => {
  fc.assert(
    fc.property(double(0.05, 4), double(1.1, 6), days, days, (perDay, ratio, s, t) => {
      const masses = (stretch: number, most: number): number[] =>
        Array.from({ length: most + 1 }, (_, x) => negativeBinomialMass(x, (perDay * stretch) / (ratio - 1), 1 / ratio))
      const mean = perDay * (s + t)
      const { cdf } = negativeBinomialLaw(mean, mean * ratio)
      const most = Math.ceil(mean)
      const [first, second] = [masses(s, most), masses(t, most)]
      let reached = 0
      for (let x = 0; x <= most; x++) for (let y = 0; y <= x; y++) reached += first[y]! * second[x - y]!
      expect(Math.abs(reached - cdf(most))).toBeLessThan(1e-10)
    }),
    runs,
  )
})
