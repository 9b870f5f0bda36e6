import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'

/** Number of nodes of the dispersion mixture; fixed so that results can be reproduced (statistics, 4.6). */
export const MIXTURE_NODES = 200

const MOST_KEPT = 500
const kept = new Map<number, Float64Array>()

/**
 * The chi-square quantiles at (k - 1/2)/200, k = 1..200, for real degrees of freedom; kept between calls, since bins
 * with equally many intervals share them and they cost more than the rest of a policy.
 *
 * @throws {RangeError} when the degrees of freedom are not above 0
 */
export function chiSquareNodes(degreesOfFreedom: number): Float64Array {
  const known = kept.get(degreesOfFreedom)
  if (known) return known
  const nodes = new Float64Array(MIXTURE_NODES)
  for (let k = 0; k < MIXTURE_NODES; k++) nodes[k] = chiSquareQuantile((k + 0.5) / MIXTURE_NODES, degreesOfFreedom)
  if (kept.size >= MOST_KEPT) kept.clear()
  kept.set(degreesOfFreedom, nodes)
  return nodes
}
