import { describe, expect, it } from 'vitest'
import { checkStatistics } from '#shared/stats/self-check.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'
import { incompleteGamma } from '#shared/stats/incomplete-gamma.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { negativeBinomialQuantile } from '#shared/stats/negative-binomial-quantile.ts'
import { negativeBinomialUpperTail } from '#shared/stats/negative-binomial-upper-tail.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { studentCdf } from '#shared/stats/student-cdf.ts'
import { studentQuantile } from '#shared/stats/student-quantile.ts'

/** Relative closeness to a value of SciPy 1.17.1. */
const near = (got: number, expected: number, relative = 1e-9): void =>
  expect(Math.abs(got - expected)).toBeLessThanOrEqual(relative * Math.abs(expected))

describe('where a general library fails ours answers (statistics, 10.2 and 10.3)', () => {
  it('Poisson: jStat overflows to Infinity and NaN here', () => {
    near(poissonCdf(155, 100), 0.9999998652869696)
    near(poissonCdf(140, 127.5), 0.8743203617423306)
    expect(poissonCdf(180, 64)).toBe(1)
    expect(poissonCdf(200, 35)).toBe(1)
    near(incompleteGamma(156, 100).lower, 1.347130304367951e-7)
    near(incompleteGamma(181, 64).lower, 5.6309340270892953e-33)
  })
  it('Poisson near a mean of 2,000 and beyond: @stdlib is wrong in the second digit here', () => {
    near(poissonCdf(2044, 2000), 0.8401579776350154)
    near(poissonCdf(100_500, 100_000), 0.943167118181506)
  })
  it('negative binomial with a size below 1: jStat answers NaN here', () => {
    near(negativeBinomialCdf(3, 0.5, 0.2), 0.8049844718999243)
    near(negativeBinomialCdf(0, 0.01, 0.3), 0.9880324594859137)
    near(negativeBinomialCdf(40, 0.3, 0.02), 0.8898769638845889)
  })
  it('negative binomial far out: jStat keeps 8 digits of the distribution function and none of the tail', () => {
    near(negativeBinomialUpperTail(400, 250, 0.5), 1.3480871912917696e-9)
  })
  it('normal: jStat answers 141 standard deviations outside (0, 1)', () => {
    for (const p of [0, 1, -0.2, 1.5, Number.NaN]) expect(() => normalQuantile(p)).toThrow(RangeError)
  })
  it('Student: jStat loses the quantile from 1e10 and the distribution function from 1e4 degrees of freedom', () => {
    near(studentQuantile(0.99, 1000), 2.330082674755513)
    near(studentQuantile(0.99, 1e6), 2.326351603120805)
    for (const freedom of [1e10, 1e15, Infinity]) near(studentQuantile(0.99, freedom), normalQuantile(0.99), 1e-9)
    expect(studentCdf(0, 1e6)).toBeCloseTo(0.5, 14)
    expect(studentCdf(studentQuantile(0.99, 1e6), 1e6)).toBeCloseTo(0.99, 12)
  })
  it('gamma: jStat answers 143 at p = 1; @stdlib is 1e-4 off at shape 1e4', () => {
    expect(() => gammaQuantile(1, 4, 1)).toThrow(RangeError)
    near(gammaQuantile(0.99, 1e4, 1), 10234.104379158054)
    near(gammaQuantile(0.5, 2000, 1), 1999.6666765450127)
    near(gammaQuantile(0.99, 1e7, 1), 10007358.02851087)
  })
  it('large means: jStat takes a second a value, @stdlib more a quantile; ours take less than 50 ms', () => {
    const start = performance.now()
    expect(negativeBinomialCdf(2_600_000, 2.5e6, 0.5)).toBe(1)
    negativeBinomialQuantile(0.99, 50, 50 / (50 + 1e6))
    gammaQuantile(0.99, 1e7, 1)
    expect(performance.now() - start).toBeLessThan(250)
  })
})

describe('the check at start-up', () => {
  it('passes with the libraries as pinned', () => expect(() => checkStatistics()).not.toThrow())
  it('names what a changed library gets wrong', () => {
    const wrong = { ...{ what: 'normal quantile at 0.975', got: () => 1.95 }, expected: 1.959963984540054 }
    expect(() => checkStatistics([wrong])).toThrow('normal quantile at 0.975: 1.95 for 1.959963984540054')
    expect(() => checkStatistics([{ ...wrong, got: () => Number.NaN }])).toThrow(/NaN/)
  })
})
