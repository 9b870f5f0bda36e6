import referenceCdf from '@stdlib/stats-base-dists-negative-binomial-cdf'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'
import { gammaCdf } from '#shared/stats/gamma-cdf.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'
import { incompleteBeta } from '#shared/stats/incomplete-beta.ts'
import { incompleteGamma } from '#shared/stats/incomplete-gamma.ts'
import { integerQuantile } from '#shared/stats/integer-quantile.ts'
import { lognormalCdf } from '#shared/stats/lognormal-cdf.ts'
import { lognormalQuantile } from '#shared/stats/lognormal-quantile.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'
import { negativeBinomialMass } from '#shared/stats/negative-binomial-mass.ts'
import { negativeBinomialQuantile } from '#shared/stats/negative-binomial-quantile.ts'
import { negativeBinomialUpperTail } from '#shared/stats/negative-binomial-upper-tail.ts'
import { normalCdf } from '#shared/stats/normal-cdf.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { normalUpperTail } from '#shared/stats/normal-upper-tail.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { poissonLoss } from '#shared/stats/poisson-loss.ts'
import { poissonMass } from '#shared/stats/poisson-mass.ts'
import { poissonQuantile } from '#shared/stats/poisson-quantile.ts'
import { stirlingError } from '#shared/stats/stirling-error.ts'
import { studentCdf } from '#shared/stats/student-cdf.ts'
import { studentQuantile } from '#shared/stats/student-quantile.ts'

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const probability = between(0.001, 0.9999)
const mean = between(-3, 4).map((exponent) => 10 ** exponent)
const size = between(-2, 4).map((exponent) => 10 ** exponent)

describe('continuous quantiles invert their distribution functions', () => {
  const inverts = (cdf: (x: number) => number, x: number, p: number) => {
    expect(Math.abs(cdf(x) - p)).toBeLessThanOrEqual(1e-11)
  }

  it('normal', () => {
    fc.assert(fc.property(probability, (p) => inverts(normalCdf, normalQuantile(p), p)))
  })
  it('Student t', () => {
    fc.assert(
      fc.property(probability, between(0.5, 1e5), (p, v) => inverts((t) => studentCdf(t, v), studentQuantile(p, v), p)),
    )
  })
  it('gamma', () => {
    fc.assert(
      fc.property(probability, between(0.1, 1e5), between(0.01, 100), (p, a, s) =>
        inverts((x) => gammaCdf(x, a, s), gammaQuantile(p, a, s), p),
      ),
    )
  })
  it('lognormal', () => {
    fc.assert(
      fc.property(probability, between(-3, 6), between(0.01, 3), (p, m, s) =>
        inverts((x) => lognormalCdf(x, m, s), lognormalQuantile(p, m, s), p),
      ),
    )
  })
  it('chi-square, to jStat precision', () => {
    fc.assert(
      fc.property(probability, between(0.5, 2000), (p, v) => {
        expect(Math.abs(gammaCdf(chiSquareQuantile(p, v), v / 2, 2) - p)).toBeLessThan(1e-9)
      }),
    )
  })
})

describe('integer quantiles', () => {
  it('Poisson: the smallest integer whose CDF reaches p', () => {
    fc.assert(
      fc.property(probability, mean, (p, m) => {
        const r = poissonQuantile(p, m)
        expect(poissonCdf(r, m)).toBeGreaterThanOrEqual(p - 1e-13)
        if (r > 0) expect(poissonCdf(r - 1, m)).toBeLessThan(p)
      }),
    )
  })
  it('negative binomial: the smallest integer whose CDF reaches p', () => {
    fc.assert(
      fc.property(probability, mean, size, (p, m, k) => {
        const q = k / (k + m)
        const r = negativeBinomialQuantile(p, k, q)
        expect(negativeBinomialCdf(r, k, q)).toBeGreaterThanOrEqual(p - 1e-13)
        if (r > 0) expect(negativeBinomialCdf(r - 1, k, q)).toBeLessThan(p)
      }),
    )
  })
  it('never fall when p rises', () => {
    fc.assert(
      fc.property(probability, probability, mean, size, (p1, p2, m, k) => {
        const [low, high] = p1 < p2 ? [p1, p2] : [p2, p1]
        expect(poissonQuantile(low, m)).toBeLessThanOrEqual(poissonQuantile(high, m))
        const q = k / (k + m)
        expect(negativeBinomialQuantile(low, k, q)).toBeLessThanOrEqual(negativeBinomialQuantile(high, k, q))
      }),
    )
  })
  it('do not depend on the first guess', () => {
    fc.assert(
      fc.property(probability, mean, fc.integer({ min: 0, max: 1_000_000 }), (p, m, guess) => {
        expect(integerQuantile((r) => poissonCdf(r, m), p, guess)).toBe(poissonQuantile(p, m))
      }),
    )
  })
  it('take an exact tie as reached: NB(size 1000, mean 1000) has CDF(999) = 0.5 exactly (R 4.2.2 answers 999)', () => {
    expect(negativeBinomialQuantile(0.5, 1000, 0.5)).toBe(999)
    expect(negativeBinomialQuantile(0.5, 1, 0.5)).toBe(0)
    expect(negativeBinomialQuantile(0.5, 5, 0.5)).toBe(4)
  })
})

describe('tails, masses and losses agree with their definitions', () => {
  it('lower and upper tail add up to one', () => {
    fc.assert(
      fc.property(size, mean, between(0.001, 0.999), (a, x, u) => {
        const gamma = incompleteGamma(a, x)
        expect(Math.abs(gamma.lower + gamma.upper - 1)).toBeLessThan(1e-12)
        const beta = incompleteBeta(u, 1 - u, a, a + 1)
        expect(Math.abs(beta.lower + beta.upper - 1)).toBeLessThan(1e-12)
        expect(normalUpperTail(x - 5) + normalCdf(x - 5)).toBeCloseTo(1, 12)
      }),
    )
  })
  it('a mass is the step of its distribution function', () => {
    fc.assert(
      fc.property(between(0.01, 300), between(0.05, 500), fc.integer({ min: 1, max: 400 }), (m, k, x) => {
        expect(Math.abs(poissonCdf(x, m) - poissonCdf(x - 1, m) - poissonMass(x, m))).toBeLessThan(1e-12)
        const q = k / (k + m)
        const step = negativeBinomialCdf(x, k, q) - negativeBinomialCdf(x - 1, k, q)
        expect(Math.abs(step - negativeBinomialMass(x, k, q))).toBeLessThan(1e-11)
        expect(Math.abs(negativeBinomialUpperTail(x, k, q) + negativeBinomialCdf(x, k, q) - 1)).toBeLessThan(1e-11)
      }),
    )
  })
  it('the negative-binomial CDF agrees with the one of @stdlib', () => {
    fc.assert(
      fc.property(between(0.01, 1e4), between(0.01, 0.999), fc.integer({ min: 0, max: 5000 }), (k, q, x) => {
        expect(Math.abs(negativeBinomialCdf(x, k, q) - referenceCdf(x, k, q))).toBeLessThan(2e-13)
      }),
    )
  })
  it('L(r) - L(r + 1) = 1 - F(r)', () => {
    fc.assert(
      fc.property(between(0.05, 300), between(0.05, 500), fc.integer({ min: 0, max: 400 }), (m, k, r) => {
        const q = k / (k + m)
        expect(Math.abs(poissonLoss(r, m) - poissonLoss(r + 1, m) - (1 - poissonCdf(r, m)))).toBeLessThan(1e-10)
        const drop = negativeBinomialLoss(r, k, q) - negativeBinomialLoss(r + 1, k, q)
        expect(Math.abs(drop - negativeBinomialUpperTail(r, k, q))).toBeLessThan(1e-9)
      }),
    )
  })
  it('the Stirling error of small integers is ln n! less the formula', () => {
    let factorial = 0
    for (let n = 1; n <= 30; n++) {
      factorial += Math.log(n)
      const formula = (n + 0.5) * Math.log(n) - n + Math.log(2 * Math.PI) / 2
      expect(Math.abs(stirlingError(n) - (factorial - formula))).toBeLessThan(2e-14 * Math.max(1, factorial))
    }
  })
})

describe('arguments outside the domain', () => {
  const refused: [string, () => unknown][] = [
    ['normalQuantile p = 1', () => normalQuantile(1)],
    ['normalQuantile p = 0', () => normalQuantile(0)],
    ['normalQuantile sd = 0', () => normalQuantile(0.5, 0, 0)],
    ['studentQuantile df = 0', () => studentQuantile(0.5, 0)],
    ['studentCdf df < 0', () => studentCdf(1, -1)],
    ['chiSquareQuantile p = 1 (jStat would answer a number)', () => chiSquareQuantile(1, 4)],
    ['gammaQuantile shape = 0', () => gammaQuantile(0.5, 0, 1)],
    ['gammaCdf scale = 0', () => gammaCdf(1, 1, 0)],
    ['lognormalCdf sd = 0', () => lognormalCdf(1, 0, 0)],
    ['poissonCdf mean < 0', () => poissonCdf(1, -1)],
    ['poissonMass NaN', () => poissonMass(Number.NaN, 1)],
    ['negativeBinomialCdf size = 0', () => negativeBinomialCdf(1, 0, 0.5)],
    ['negativeBinomialCdf q = 0', () => negativeBinomialCdf(1, 1, 0)],
    ['integerQuantile p = 1', () => integerQuantile(() => 1, 1)],
    ['integerQuantile never reached', () => integerQuantile(() => 0.5, 0.9)],
    ['stirlingError 0', () => stirlingError(0)],
  ]
  for (const [name, call] of refused) it(`refuses ${name}`, () => expect(call).toThrow(RangeError))
})
