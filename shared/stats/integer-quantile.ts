/** A CDF value within 64 machine epsilons of p counts as reached, so that exact ties are not missed (R nmath). */
export const TIE_GUARD = 1 - 64 * Number.EPSILON

/**
 * Smallest integer r >= 0 with CDF(r) >= p, by doubling from a first guess and then bisection.
 *
 * Ties: CDF(r) >= p (1 - 64 eps), as R's discrete quantile functions do. `guess` only saves evaluations.
 * Shape: `cdf` must not decrease and must reach p.
 * Source: R 4.2.2 nmath `qDiscrete_search.h` for the tie rule.
 *
 * @throws {RangeError} when p is outside [0, 1), or the CDF does not reach p below 2^53
 * @example integerQuantile((r) => (r + 1) / 10, 0.5) // => 4
 */
export function integerQuantile(cdf: (r: number) => number, p: number, guess = 1): number {
  if (!(p >= 0 && p < 1)) throw new RangeError(`p is outside [0, 1): ${p}`)
  const reached = (r: number) => cdf(r) >= p * TIE_GUARD
  let high = Math.max(0, Math.round(guess))
  let low = -1
  let step = Math.max(1, Math.round(high / 16))
  if (reached(high)) {
    // Walk down in growing steps until the CDF falls below p.
    for (let at = high - step; at > -1; at -= step) {
      if (!reached(at)) {
        low = at
        break
      }
      high = at
      step *= 2
    }
  } else {
    low = high
    for (high = low + step; !reached(high); high += step) {
      low = high
      step *= 2
      if (high > Number.MAX_SAFE_INTEGER) throw new RangeError('the distribution function does not reach p')
    }
  }
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2)
    if (reached(middle)) high = middle
    else low = middle
  }
  return high
}
