import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/kernel/random.ts'
import { drawGamma, drawNegativeBinomial } from '#shared/kernel/random-laws.ts'
import { demandMoments } from '#shared/policy/demand-moments.ts'
import { ownShare, poolPrior } from '#shared/policy/pool.ts'
import type { PoolMember } from '#shared/policy/pool.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'

const member = (i: number, quantity: number, exposureDays: number, more: Partial<PoolMember> = {}): PoolMember => ({
  key: `bin ${i}`,
  wardId: `ward ${i}`,
  quantity,
  exposureDays,
  dispersion: 2,
  freedom: 3,
  ...more,
})

describe('the prior of an item in five wards, worked by hand', () => {
  it('equal exposure: m 3, S 100, tau^2 = (100 − 4 × 2 × 3)/40 = 1.9', () => {
    const prior = poolPrior(
      [10, 20, 30, 40, 50].map((x, i) => member(i, x, 10)),
      [],
    )!
    expect(prior).toMatchObject({ nu0: 8, w0: 2, basis: 'item', members: 5, wards: 5 })
    expect(prior.rate!.a).toBeCloseTo(9 / 1.9, 12)
    expect(prior.rate!.b).toBeCloseTo(3 / 1.9, 12)
  })

  it('unequal exposure: m 10/3, S 400/3, tau^2 = (400/3 − 4 × 1.5 × 10/3)/(140/3) = 17/7', () => {
    const exposure = [10, 10, 10, 10, 20]
    const bins = [10, 20, 30, 40, 100].map((x, i) => member(i, x, exposure[i]!, { dispersion: 1.5 }))
    const prior = poolPrior(bins, [])!
    expect(prior.rate!.a).toBeCloseTo(700 / 153, 12)
    expect(prior.rate!.b).toBeCloseTo(70 / 51, 12)
  })

  it('caps alike wards at a = 400: their rates never count as equal', () => {
    const prior = poolPrior(
      [20, 20, 20, 20, 20].map((x, i) => member(i, x, 10)),
      [],
    )!
    expect(prior.rate!.a).toBeCloseTo(400, 9)
    expect(prior.rate!.b).toBeCloseTo(200, 9)
  })

  it('weighs dispersions by their degrees of freedom, floors each at 0.05 and the mean at 1', () => {
    const of = (values: [number | null, number][]) =>
      poolPrior(
        values.map(([dispersion, freedom], i) => member(i, 10 * (i + 1), 10, { dispersion, freedom })),
        [],
      )!.w0
    const silent: [number | null, number] = [null, 0]
    // (1 × 0.05 + 3 × 3.05)/4; a ratio with less than one degree of freedom says nothing.
    expect(of([[0.01, 1], [3.05, 3], [99, 0.5], silent, silent])).toBeCloseTo(2.3, 12)
    expect(of([[0.2, 3], [0.4, 3], [0.1, 3], [0.3, 3], silent])).toBe(1)
  })
})

describe('who is asked', () => {
  const item = (count: number) => Array.from({ length: count }, (_, i) => member(i, 10 + i, 10))
  const category = (items: number, dispersion = 3) =>
    Array.from({ length: items }, (_, i) => [member(i, 10, 10, { dispersion, wardId: 'ward 1' })])

  it('the item in five wards, else ten items of the category for the dispersion alone, else nobody', () => {
    expect(poolPrior(item(5), category(10))).toMatchObject({ basis: 'item', w0: 2 })
    expect(poolPrior(item(4), category(10))).toEqual({
      ...{ nu0: 8, w0: 3, rate: null, basis: 'category', members: 10, wards: 1 },
    })
    expect(poolPrior(item(4), category(9))).toBeNull()
    expect(poolPrior([], [])).toBeNull()
  })

  it('wards, not bins, and only those that were counted', () => {
    const oneWard = item(8).map((bin) => ({ ...bin, wardId: 'ward 1' }))
    expect(poolPrior(oneWard, [])).toBeNull()
    expect(poolPrior([...item(4), member(9, 0, 0)], [])).toBeNull()
  })

  it('the category where nobody used the item at all: there is no spread of rates', () => {
    const unused = item(6).map((bin) => ({ ...bin, quantity: 0, dispersion: null }))
    expect(poolPrior(unused, category(10))).toMatchObject({ basis: 'category', rate: null })
    expect(poolPrior(unused, [])).toBeNull()
  })

  it('the category for the dispersion where the item tells only rates, else the prior of a bin on its own', () => {
    const once = item(5).map((bin) => ({ ...bin, dispersion: null, freedom: 0 }))
    expect(poolPrior(once, category(10))).toMatchObject({ basis: 'item', nu0: 8, w0: 3 })
    expect(poolPrior(once, [])).toMatchObject({ basis: 'item', nu0: 4, w0: 2 })
    expect(poolPrior(once, [])!.rate).not.toBeNull()
  })
})

it('says how much of a rate is the own counts', () => {
  expect(ownShare({ rate: null }, { exposureDays: 20 }, 2)).toBeNull()
  expect(ownShare({ rate: { a: 1, b: 10 } }, { exposureDays: 0 }, 2)).toBe(0)
  expect(ownShare({ rate: { a: 1, b: 0 } }, { exposureDays: 0 }, 2)).toBe(0)
  expect(ownShare({ rate: { a: 1, b: 0 } }, { exposureDays: 7 }, 2)).toBe(1)
})

/** The simulation of `calibration_aux.R`, part E: 12 wards, 4 counts, ratio 2, ward rates Gamma(shape 4), P = 5 days. */
describe('twelve simulated wards with four counts each', () => {
  const P = 5
  const ratio = 2
  const aims = [0.95, 0.98, 0.99, 0.995]

  /** Expected pinball loss of level r: p E(D − r)+ + (1 − p) E(r − D)+. */
  const pinball = (r: number, p: number, mean: number): number => {
    const short = negativeBinomialLoss(r, mean / (ratio - 1), 1 / ratio)
    return p * short + (1 - p) * (r - mean + short)
  }

  it.each([2, 10])('pooling loses no more than own data, at a mean of %d over the protection interval', (mean) => {
    const random = seededRandom(`pool ${mean}`)
    let own = 0
    let pooled = 0
    for (let repeat = 0; repeat < 12; repeat++) {
      const wards = Array.from({ length: 12 }, (_, i) => {
        const rate = Math.max(1e-9, drawGamma(random, 4, mean / P / 4))
        const intervals = Array.from({ length: 4 }, () => {
          const u = random()
          const days = u < 0.4 ? 3 : u < 0.8 ? 4 : 7
          return { days, quantity: drawNegativeBinomial(random, rate * days, ratio) }
        })
        const moments = demandMoments(
          intervals.map((interval) => ({ ...interval, exposureDays: interval.days, censored: false, weight: 1 })),
        )
        const bin = member(i, moments.meanPerDay * moments.exposureDays, moments.exposureDays, {
          dispersion: moments.dispersion,
          freedom: moments.intervals - 1,
        })
        return { rate, intervals, bin }
      })
      const { nu0, w0, rate } = poolPrior(
        wards.map(({ bin }) => bin),
        [],
      )!
      for (const ward of wards)
        for (const serviceLevel of aims) {
          const input = { intervals: ward.intervals, leadTime: { meanDays: P }, serviceLevel }
          own += pinball(reorderPoint(input).reorderPoint!, serviceLevel, ward.rate * P)
          const prior = { nu0, w0, rate }
          pooled += pinball(reorderPoint({ ...input, prior }).reorderPoint!, serviceLevel, ward.rate * P)
        }
    }
    expect(pooled).toBeLessThan(own)
  })
})
