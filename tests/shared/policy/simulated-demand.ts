import type { Random } from '#shared/kernel/random.ts'
import { drawNegativeBinomial, drawPoisson } from '#shared/kernel/random-laws.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import type { TruthName } from './published-calibration.ts'

/** Demand of a simulated bin whose law over the protection interval is known exactly. */
export interface Truth {
  /** Units used over each of these stretches of whole days, one after the other */
  draw(random: Random, days: readonly number[]): number[]
  /** P(use over the protection interval <= r) */
  cdf(r: number): number
  /** Variance-to-mean ratio; 1.5 where days are not independent and there is none */
  ratio: number
}

/** Days of the protection interval of the calibration study. */
export const protectionDays = 5

/**
 * The truths of `calibration.R` (statistics, 4.8) with a mean over the protection interval: Poisson; negative binomial
 * of ratio 3 and 8; 70 % of days without use, else Poisson; use on 15 % of days, 1 + geometric; a patient who is there
 * (10 days on average) or not (20 days), Poisson while there.
 */
export function truthOf(name: TruthName, mean: number): Truth {
  const perDay = mean / protectionDays
  switch (name) {
    case 'poisson':
      return {
        draw: (random, days) => days.map((t) => drawPoisson(random, perDay * t)),
        cdf: (r) => poissonCdf(r, mean),
        ratio: 1,
      }
    case 'nb3':
      return negativeBinomialTruth(perDay, 3)
    case 'nb8':
      return negativeBinomialTruth(perDay, 8)
    case 'zip':
      return zeroInflatedTruth(perDay, 0.3)
    case 'lumpy':
      return lumpyTruth(perDay)
    case 'bursty':
      return burstyTruth(perDay)
  }
}

function negativeBinomialTruth(perDay: number, ratio: number): Truth {
  const mean = perDay * protectionDays
  return {
    draw: (random, days) => days.map((t) => drawNegativeBinomial(random, perDay * t, ratio)),
    cdf: (r) => negativeBinomialCdf(r, mean / (ratio - 1), 1 / ratio),
    ratio,
  }
}

function zeroInflatedTruth(perDay: number, share: number): Truth {
  const whenUsed = perDay / share
  const daily = poissonMasses(whenUsed, 1e-15).map((mass, y) => share * mass + (y === 0 ? 1 - share : 0))
  return {
    draw: (random, days) => days.map((t) => drawPoisson(random, whenUsed * drawDays(random, t, share))),
    cdf: cdfOf(convolved(daily, protectionDays)),
    ratio: 1 + whenUsed * (1 - share),
  }
}

function lumpyTruth(perDay: number): Truth {
  const share = perDay / 0.15 < 1 ? perDay / 1.0001 : 0.15
  const success = 1 / Math.max(perDay / 0.15, 1.0001)
  const longest = Math.ceil(Math.log(1e-15) / Math.log(1 - success)) + 5
  const sizes = Array.from({ length: longest }, (_, y) => success * (1 - success) ** y)
  const total = sizes.reduce((sum, mass) => sum + mass, 0)
  const daily = [1 - share, ...sizes.map((mass) => (share * mass) / total)]
  const mean = daily.reduce((sum, mass, y) => sum + mass * y, 0)
  const square = daily.reduce((sum, mass, y) => sum + mass * y * y, 0)
  return {
    draw: (random, days) =>
      days.map((t) => {
        let units = 0
        for (let k = drawDays(random, t, share); k > 0; k--) units += 1 + drawGeometric(random, success)
        return units
      }),
    cdf: cdfOf(convolved(daily, protectionDays)),
    ratio: (square - mean * mean) / mean,
  }
}

const comes = 1 / 20
const goes = 1 / 10

function burstyTruth(perDay: number): Truth {
  const there = comes / (comes + goes)
  const whenThere = perDay / there
  const daysThere = new Float64Array(protectionDays + 1)
  for (let pattern = 0; pattern < 2 ** protectionDays; pattern++) {
    const days = Array.from({ length: protectionDays }, (_, i) => ((pattern >> i) & 1) === 1)
    const start = days[0] ? there : 1 - there
    const share = days.slice(1).reduce((p, day, i) => p * stays(days[i]!, day), start)
    daysThere[days.filter(Boolean).length]! += share
  }
  return {
    draw: (random, days) => {
      let present: boolean | null = null
      return days.map((t) => {
        let count = 0
        for (let day = 0; day < t; day++) {
          present = present === null ? random() < there : present ? random() >= goes : random() < comes
          if (present) count++
        }
        return drawPoisson(random, whenThere * count)
      })
    },
    cdf: (r) => daysThere.reduce((sum, share, k) => sum + share * (k === 0 ? 1 : poissonCdf(r, whenThere * k)), 0),
    ratio: 1.5,
  }
}

const stays = (before: boolean, now: boolean): number => (before ? (now ? 1 - goes : goes) : now ? comes : 1 - comes)

/** On how many of so many days something happens. */
function drawDays(random: Random, days: number, share: number): number {
  let count = 0
  for (let day = 0; day < days; day++) if (random() < share) count++
  return count
}

const drawGeometric = (random: Random, success: number): number =>
  Math.floor(Math.log(1 - random()) / Math.log(1 - success))

function poissonMasses(mean: number, least: number): number[] {
  const masses = [Math.exp(-mean)]
  for (let y = 1; y < mean || masses.at(-1)! > least; y++) masses.push((masses.at(-1)! * mean) / y)
  return masses
}

function convolved(daily: readonly number[], days: number): Float64Array {
  let sum = Float64Array.of(1)
  for (let day = 0; day < days; day++) {
    const next = new Float64Array(sum.length + daily.length - 1)
    for (let x = 0; x < sum.length; x++) for (let y = 0; y < daily.length; y++) next[x + y]! += sum[x]! * daily[y]!
    sum = next
  }
  return sum
}

function cdfOf(masses: Float64Array): (r: number) => number {
  const reached = masses.map(
    (
      (sum) => (mass: number) =>
        (sum += mass)
    )(0),
  )
  return (r) => (r >= reached.length ? 1 : Math.min(1, reached[r]! / reached.at(-1)!))
}
