import { binomialMass } from './binomial-mass.ts'
import type { Tails } from './incomplete-gamma.ts'

const TINY = 1e-300

/**
 * Regularised incomplete beta function: lower I_x(a, b) and upper 1 - I_x(a, b).
 *
 * `y` is 1 - x, passed apart so that a tiny one keeps its digits. Continued fraction on the side where it converges
 * fast, with the factor x^a y^b / B(a, b) from the saddle-point binomial mass.
 * Source: Abramowitz & Stegun 26.5.8; modified Lentz method. Accuracy: relative error < 1e-12 of the smaller tail.
 *
 * @throws {RangeError} when a or b is not above 0 or x lies outside [0, 1]
 */
export function incompleteBeta(x: number, y: number, a: number, b: number): Tails {
  if (!(a > 0 && b > 0 && x >= 0 && y >= 0 && x <= 1 && y <= 1))
    throw new RangeError(`incompleteBeta is outside its domain: ${x}, ${a}, ${b}`)
  if (x === 0) return { lower: 0, upper: 1 }
  if (y === 0) return { lower: 1, upper: 0 }
  const factor = (binomialMass(a, a + b, x, y) * a * b) / (a + b)
  if (x < (a + 1) / (a + b + 2)) {
    const lower = Math.min(1, (factor / a) * continuedFraction(x, a, b))
    return { lower, upper: 1 - lower }
  }
  const upper = Math.min(1, (factor / b) * continuedFraction(y, b, a))
  return { lower: 1 - upper, upper }
}

function continuedFraction(x: number, a: number, b: number): number {
  let c = 1
  let d = 1 / guard(1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m < 1e6; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    const delta = d * c
    h *= delta
    if (Math.abs(delta - 1) < 5e-16) break
  }
  return h
}

function guard(value: number): number {
  return Math.abs(value) < TINY ? TINY : value
}
