import { problem } from '#shared/contracts/problems.ts'
import { PolicyInputError } from '#shared/policy/policy-input-error.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

/** Works out a policy from given figures. @throws {Problem} invalid-request, naming each field */
export function preview(input: unknown): PolicyResult & Record<string, unknown> {
  try {
    return { ...reorderPoint(input as PolicyInput) }
  } catch (error) {
    if (!(error instanceof PolicyInputError)) throw error
    throw problem('invalid-request', `${error.pointer || '/'}: ${error.detail}`, { errors: error.errors })
  }
}
