import { averageLaw } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'
import type { Fitted } from './fitted.ts'
import type { ResolvedInput } from './resolve-input.ts'

/**
 * The law of demand until the next possible arrival, by a fitted method: over lead time and review period with the
 * spread of the lead time, or, where lead times were seen, the average over them.
 *
 * Source: statistics, 1.2 and 1.3.
 */
export function protectionLaw(input: ResolvedInput, fitted: Fitted): DemandLaw {
  const { observedDays, sdDays } = input.leadTime
  if (observedDays.length === 0) {
    const spread = sdDays * input.exposureRatio
    return fitted.lawOver({
      days: input.protectionDays,
      exposure: input.protectionExposureDays,
      variance: spread * spread,
    })
  }
  const shares = new Map<number, number>()
  for (const days of observedDays) shares.set(days, (shares.get(days) ?? 0) + 1 / observedDays.length)
  return averageLaw(
    [...shares].map(([lead, weight]) => {
      const days = lead + input.reviewPeriodDays
      return { law: fitted.lawOver({ days, exposure: days * input.exposureRatio, variance: 0 }), weight }
    }),
  )
}
