import { averageLaw } from '#shared/policy/demand-law.ts'
import { fitMethod } from '#shared/policy/fit-method.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { resolveInput } from '#shared/policy/resolve-input.ts'

/** P(use until the next arrival <= units) by the method of a policy; null when there is nothing to learn from. */
export function protectionCdf(given: PolicyInput): ((units: number) => number) | null {
  const input = resolveInput(given)
  const fitted = fitMethod(input)
  if (!fitted) return null
  const { observedDays, sdDays } = input.leadTime
  if (observedDays.length === 0) {
    const spread = sdDays * input.exposureRatio
    return fitted.lawOver({
      days: input.protectionDays,
      exposure: input.protectionExposureDays,
      variance: spread * spread,
    }).cdf
  }
  return averageLaw(
    observedDays.map((lead) => {
      const days = lead + input.reviewPeriodDays
      const exposure = days * input.exposureRatio
      return { law: fitted.lawOver({ days, exposure, variance: 0 }), weight: 1 / observedDays.length }
    }),
  ).cdf
}
