import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'

/** Number of nodes of the dispersion mixture; fixed so that results can be reproduced (statistics, 4.6). */
export const MIXTURE_NODES = 200

const MOST_KEPT = 500
const kept = new Map<number, Float64Array>()

/**
 * The chi-square quantiles at (k - 1/2)/200, k = 1..200, for real degrees of freedom; kept between calls, since bins
 * with equally many intervals share them and they cost more than the rest of a policy.
 *
 * Whole degrees of freedom are computed. Forgetting makes them real numbers that no two bins share: from 6 to 2,048
 * those are interpolated between kept rows (10 points, Lagrange), a hundred times faster.
 * Accuracy: relative error < 1e-10 as `chiSquareQuantile`; interpolated < 2e-12.
 *
 * @throws {RangeError} when the degrees of freedom are not above 0
 */
export function chiSquareNodes(degreesOfFreedom: number): Float64Array {
  const known = kept.get(degreesOfFreedom)
  if (known) return known
  const step = stepAt(degreesOfFreedom)
  if (step !== null && !Number.isInteger(degreesOfFreedom)) return interpolated(degreesOfFreedom, step)
  const nodes = new Float64Array(MIXTURE_NODES)
  for (let k = 0; k < MIXTURE_NODES; k++) nodes[k] = chiSquareQuantile((k + 0.5) / MIXTURE_NODES, degreesOfFreedom)
  if (kept.size >= MOST_KEPT) kept.clear()
  kept.set(degreesOfFreedom, nodes)
  return nodes
}

const POINTS = 10
const rows = new Map<number, Float64Array>()

/** Distance of the kept rows around a number of degrees of freedom: the quantiles bend more where there are few. */
function stepAt(degreesOfFreedom: number): number | null {
  if (!(degreesOfFreedom >= 6 && degreesOfFreedom <= 2048)) return null
  if (degreesOfFreedom < 24) return 0.25
  return degreesOfFreedom < 128 ? 1 : 4
}

function rowAt(degreesOfFreedom: number): Float64Array {
  let row = rows.get(degreesOfFreedom)
  if (!row) {
    row = new Float64Array(MIXTURE_NODES)
    for (let k = 0; k < MIXTURE_NODES; k++) row[k] = gammaQuantile((k + 0.5) / MIXTURE_NODES, degreesOfFreedom / 2, 2)
    rows.set(degreesOfFreedom, row)
  }
  return row
}

function interpolated(degreesOfFreedom: number, step: number): Float64Array {
  const nodes = new Float64Array(MIXTURE_NODES)
  const first = Math.floor(degreesOfFreedom / step) - POINTS / 2 + 1
  const at = degreesOfFreedom / step - first
  for (let i = 0; i < POINTS; i++) {
    let weight = 1
    for (let j = 0; j < POINTS; j++) if (j !== i) weight *= (at - j) / (i - j)
    const row = rowAt((first + i) * step)
    for (let k = 0; k < MIXTURE_NODES; k++) nodes[k]! += weight * row[k]!
  }
  return nodes
}
