import { fitMethod } from '#shared/policy/fit-method.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { protectionLaw } from '#shared/policy/protection-law.ts'
import { resolveInput } from '#shared/policy/resolve-input.ts'

/** P(use until the next arrival <= units) by the method of a policy; null when there is nothing to learn from. */
export function protectionCdf(given: PolicyInput): ((units: number) => number) | null {
  const input = resolveInput(given)
  const fitted = fitMethod(input)
  return fitted ? protectionLaw(input, fitted).cdf : null
}
