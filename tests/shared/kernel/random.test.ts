import { describe, expect, it } from 'vitest'
import {
  drawExponential,
  drawGamma,
  drawNegativeBinomial,
  drawNormal,
  drawPoisson,
} from '#shared/kernel/random-laws.ts'
import { drawInteger, drawOne, randomBytesOf, seededRandom, type Random } from '#shared/kernel/random.ts'
import { poissonMass } from '#shared/stats/poisson-mass.ts'

const draws = 40_000

function moments(law: (random: Random) => number): { mean: number; variance: number; values: number[] } {
  const random = seededRandom('moments')
  const values = Array.from({ length: draws }, () => law(random))
  const mean = values.reduce((a, b) => a + b, 0) / draws
  return { mean, variance: values.reduce((a, b) => a + (b - mean) ** 2, 0) / (draws - 1), values }
}

describe('seededRandom', () => {
  it('gives the same draws for the same text and others for another', () => {
    const ten = (seed: string): number[] => Array.from({ length: 10 }, seededRandom(seed))
    expect(ten('Tallowmere')).toEqual(ten('Tallowmere'))
    expect(ten('Tallowmere 1')).not.toEqual(ten('Tallowmere 2'))
  })

  it('spreads its draws evenly', () => {
    const { values } = moments((random) => random())
    const tenths = Array.from({ length: 10 }, (_, i) => values.filter((v) => Math.floor(v * 10) === i).length)
    const chiSquare = tenths.reduce((sum, n) => sum + (n - draws / 10) ** 2 / (draws / 10), 0)
    // 99.9 % point of chi-square with 9 degrees of freedom.
    expect(chiSquare).toBeLessThan(27.88)
    expect(Math.min(...values)).toBeGreaterThanOrEqual(0)
    expect(Math.max(...values)).toBeLessThan(1)
  })

  it('has first draws that do not follow the order of their texts', () => {
    const firsts = Array.from({ length: 2000 }, (_, i) => seededRandom(`bin ${i}`)())
    const mean = firsts.reduce((a, b) => a + b, 0) / firsts.length
    expect(Math.abs(mean - 0.5)).toBeLessThan(0.025)
    const lagged = firsts.slice(1).reduce((sum, v, i) => sum + (v - 0.5) * (firsts[i]! - 0.5), 0) / firsts.length
    expect(Math.abs(lagged * 12)).toBeLessThan(0.08)
  })
})

describe('whole numbers, choices and bytes', () => {
  it('stay inside their range and reach both ends', () => {
    const random = seededRandom('range')
    const seen = new Set(Array.from({ length: 500 }, () => drawInteger(random, 3, 7)))
    expect([...seen].sort()).toEqual([3, 4, 5, 6, 7])
    const bytes = randomBytesOf(random, 4000)
    expect(Math.min(...bytes)).toBe(0)
    expect(Math.max(...bytes)).toBe(255)
  })

  it('cannot choose from nothing', () => {
    expect(() => drawOne(seededRandom('none'), [])).toThrow(RangeError)
  })
})

describe('laws', () => {
  const laws: [string, (random: Random) => number, number, number][] = [
    ['exponential', (r) => drawExponential(r, 3), 3, 9],
    ['normal', (r) => drawNormal(r), 0, 1],
    ['gamma of shape 4', (r) => drawGamma(r, 4, 0.5), 2, 1],
    ['gamma of shape 0.3', (r) => drawGamma(r, 0.3, 2), 0.6, 1.2],
    ['Poisson of 0.4', (r) => drawPoisson(r, 0.4), 0.4, 0.4],
    ['Poisson of 80', (r) => drawPoisson(r, 80), 80, 80],
    ['negative binomial', (r) => drawNegativeBinomial(r, 6, 2.5), 6, 15],
    ['negative binomial of small mean', (r) => drawNegativeBinomial(r, 0.2, 4), 0.2, 0.8],
  ]
  it.each(laws)('%s has its mean and variance', (_, law, mean, variance) => {
    const found = moments(law)
    // Five standard errors of a mean; variances are looser because heavy tails move them.
    expect(Math.abs(found.mean - mean)).toBeLessThan(5 * Math.sqrt(variance / draws))
    expect(Math.abs(found.variance / variance - 1)).toBeLessThan(0.08)
  })

  it('Poisson draws come as often as the law says', () => {
    const { values } = moments((r) => drawPoisson(r, 2.5))
    for (let k = 0; k <= 6; k += 1) {
      const expected = draws * poissonMass(k, 2.5)
      expect(Math.abs(values.filter((v) => v === k).length - expected)).toBeLessThan(5 * Math.sqrt(expected))
    }
  })

  it('refuse what has no law', () => {
    const random = seededRandom('refused')
    expect(() => drawExponential(random, 0)).toThrow(RangeError)
    expect(() => drawGamma(random, -1, 1)).toThrow(RangeError)
    expect(() => drawPoisson(random, Number.NaN)).toThrow(RangeError)
  })
})
