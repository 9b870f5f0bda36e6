/**
 * Deviance term x ln(x / m) + m - x of the Poisson law, without cancellation when x is near m.
 *
 * Source: C. Loader, "Fast and Accurate Computation of Binomial Probabilities" (2000), sec. 4 (`bd0`).
 * Accuracy: relative error < 1e-15 near x = m, where the plain formula loses all digits.
 *
 * @throws {RangeError} when x or m is not above 0
 */
export function deviance(x: number, m: number): number {
  if (!(x > 0 && m > 0)) throw new RangeError(`deviance needs positive arguments: ${x}, ${m}`)
  if (Math.abs(x - m) < 0.1 * (x + m)) {
    const v = (x - m) / (x + m)
    let sum = (x - m) * v
    let term = 2 * x * v
    for (let j = 1; j < 1000; j++) {
      term *= v * v
      const next = sum + term / (2 * j + 1)
      if (next === sum) return next
      sum = next
    }
  }
  return x * Math.log(x / m) + m - x
}
