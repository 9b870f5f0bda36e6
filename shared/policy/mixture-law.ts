import { TIE_GUARD } from '#shared/stats/integer-quantile.ts'
import { negativeBinomialLoss } from '#shared/stats/negative-binomial-loss.ts'
import { MIXTURE_NODES } from './chi-square-nodes.ts'
import type { DemandLaw } from './demand-law.ts'
import type { MixtureNodes } from './mixture-nodes.ts'
import { advance, distantLevel, LONGEST_RUN, mixtureCdf, startRun } from './mixture-run.ts'

/**
 * Equal mixture of 200 negative-binomial laws; values of its distribution function are kept as they are run through.
 *
 * `variance` is the figure to report for the mixture.
 * Source: statistics, 4.6. Accuracy: absolute error < 1e-11.
 */
export function mixtureLaw(nodes: MixtureNodes, variance: number): DemandLaw {
  const run = startRun(nodes)
  const table = [run.reached]
  const cdf = (r: number): number => {
    if (r < 0) return 0
    const whole = Math.floor(r)
    if (!run.fits || whole > LONGEST_RUN) return mixtureCdf(nodes, whole)
    while (run.y < whole) table.push(advance(run))
    return table[whole]!
  }
  const level = (p: number): number => {
    if (!run.fits) return distantLevel(nodes, p, variance)
    const aim = p * TIE_GUARD
    for (let r = 0; r <= LONGEST_RUN; r++) if (cdf(r) >= aim) return r
    return distantLevel(nodes, p, variance)
  }
  const loss = (r: number): number => {
    let total = 0
    for (let k = 0; k < nodes.count; k++) {
      const ratio = nodes.ratios[k]!
      total += nodes.shares[k]! * negativeBinomialLoss(r, nodes.means[k]! / (ratio - 1), 1 / ratio)
    }
    return total / MIXTURE_NODES
  }
  return { mean: nodes.mean, variance, cdf, loss, level }
}
