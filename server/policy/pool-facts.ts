import { demandMoments } from '#shared/policy/demand-moments.ts'
import { ownShare } from '#shared/policy/pool.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import type { PolicyFacts } from './policy-facts.ts'
import type { PoolRow } from './pools.repository.ts'

/** Effective days and number of the intervals an input learns from; null without one. */
function effective(input: PolicyInput) {
  const used = (input.intervals ?? []).filter((i) => (i.weight ?? 1) > 0)
  if (used.length === 0) return null
  return demandMoments(
    used.map((i) => ({
      days: i.days,
      exposureDays: i.exposureDays ?? i.days,
      quantity: i.quantity,
      censored: i.censored ?? false,
      weight: i.weight ?? 1,
    })),
  )
}

/** What a bin tells its like: its own figures, forgotten as it forgets them, without what its like told it. */
export function memberOf(input: PolicyInput, result: PolicyResult): PolicyFacts['member'] {
  const own = effective(input)
  if (!own || !result.demand || result.method === 'entered') return null
  return {
    quantity: Math.max(0, result.demand.meanPerDay * own.exposureDays),
    exposureDays: own.exposureDays,
    dispersion: result.demand.dispersion,
    freedom: Math.max(0, own.intervals - 1),
  }
}

/** Weight of a bin's own counts in its rate, at the dispersion its own counts and the pool agree on. */
export function shareOf(pool: PoolRow, input: PolicyInput, result: PolicyResult): number | null {
  if (pool.rateA === null || pool.rateB === null) return null
  const own = effective(input)
  if (!own) return 0
  const freedom = Math.max(0, own.intervals - 1)
  const seen = result.demand?.dispersion ?? 1
  const dispersion = Math.max(1, (pool.nu0 * pool.w0 + freedom * seen) / (pool.nu0 + freedom))
  return ownShare({ rate: { a: pool.rateA, b: pool.rateB } }, own, dispersion)
}
