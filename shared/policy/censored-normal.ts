import { normalUpperTail } from '#shared/stats/normal-upper-tail.ts'
import type { DemandMoments } from './demand-moments.ts'
import { demandMoments } from './demand-moments.ts'
import type { ResolvedInterval } from './resolve-input.ts'

/**
 * Maximum-likelihood mean and variance per day of normal demand when some intervals ended empty (Tobit).
 *
 * log L = sum over whole intervals ln phi(z)/sd + sum over empty ones ln(1 - Phi(z)), z = (x - mu t)/(sd sqrt t).
 * Newton steps in (mu/sd, 1/sd), in which log L is concave. The variance is the ML one (divisor n).
 * Shape: at least two intervals that did not end empty, not all on one line.
 * Source: J. Tobin, Econometrica 26 (1958) 24-36; R. J. Olsen, Econometrica 46 (1978) 1211-1215; statistics, 4.11.
 * Accuracy: relative 1e-10.
 *
 * @returns units per day; variance 0 where the whole intervals show none
 */
export function censoredNormalMoments(intervals: ResolvedInterval[]): { meanPerDay: number; variancePerDay: number } {
  const start: DemandMoments = demandMoments(intervals)
  const whole = demandMoments(intervals.filter((interval) => !interval.censored))
  if (!(whole.variancePerDay && whole.variancePerDay > 0)) return { meanPerDay: whole.meanPerDay, variancePerDay: 0 }
  let theta = 1 / Math.sqrt(start.variancePerDay || whole.variancePerDay)
  let beta = start.meanPerDay * theta
  let value = logLikelihood(intervals, beta, theta)
  for (let round = 0; round < 200; round++) {
    const [stepBeta, stepTheta] = newtonStep(intervals, beta, theta)
    let size = 1
    let next = -Infinity
    for (; size > 1e-12; size /= 2) {
      next =
        theta + size * stepTheta > 0
          ? logLikelihood(intervals, beta + size * stepBeta, theta + size * stepTheta)
          : -Infinity
      if (next >= value - 1e-13 * Math.abs(value)) break
    }
    beta += size * stepBeta
    theta += size * stepTheta
    value = next
    if (Math.abs(stepBeta) <= 1e-14 * Math.abs(beta) && Math.abs(stepTheta) <= 1e-14 * theta) break
  }
  return { meanPerDay: beta / theta, variancePerDay: 1 / (theta * theta) }
}

function logLikelihood(intervals: ResolvedInterval[], beta: number, theta: number): number {
  let sum = 0
  for (const { weight, exposureDays, quantity, censored } of intervals) {
    const root = Math.sqrt(exposureDays)
    const z = (theta * quantity) / root - beta * root
    sum += weight * (censored ? logUpperTail(z) : Math.log(theta) - (z * z) / 2)
  }
  return sum
}

/** Solves H step = -gradient for the concave log-likelihood. */
function newtonStep(intervals: ResolvedInterval[], beta: number, theta: number): [number, number] {
  let gradientBeta = 0
  let gradientTheta = 0
  let bb = 0
  let bt = 0
  let tt = 0
  for (const { weight, exposureDays, quantity, censored } of intervals) {
    const root = Math.sqrt(exposureDays)
    const y = quantity / root
    const z = theta * y - beta * root
    const slope = censored ? hazard(z) : z
    const bend = weight * (censored ? slope * (slope - z) : 1)
    gradientBeta += weight * slope * root
    gradientTheta += weight * ((censored ? 0 : 1 / theta) - slope * y)
    bb -= bend * root * root
    bt += bend * root * y
    tt -= bend * y * y + (censored ? 0 : weight / (theta * theta))
  }
  const determinant = bb * tt - bt * bt
  return [
    (-gradientBeta * tt + gradientTheta * bt) / determinant,
    (-gradientTheta * bb + gradientBeta * bt) / determinant,
  ]
}

/** phi(z)/(1 - Phi(z)); far out z + 1/z - 2/z^3 (A&S 26.2.12). */
function hazard(z: number): number {
  if (z > 30) return z + 1 / z - 2 / z ** 3
  return Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI) / normalUpperTail(z)
}

function logUpperTail(z: number): number {
  if (z > 30) return (-z * z) / 2 - Math.log(Math.sqrt(2 * Math.PI) * hazard(z))
  return Math.log(normalUpperTail(z))
}
