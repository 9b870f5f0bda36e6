import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'

/** What one aim would mean for a bin, beside the point in force. */
export interface AimStep {
  level: number
  reorderPoint: number
  /** Units kept above what is expected to be used. */
  safetyStock: number
  /** Units more (or less) on the shelf than now. */
  units: number
  /** Money more (or less) tied up than now; null without a price. */
  cost: number | null
  /** The shelf is too small and cuts the point. */
  cut: boolean
  now: boolean
}

const same = (a: number, b: number): boolean => Math.abs(a - b) < 1e-9

/**
 * Works every step out with the policy's own input; nothing is sent anywhere.
 *
 * @param price of one unit of use, null where none is known
 * @param reorderPoint the shared function, handed in because it is loaded only when somebody changes an aim
 */
export function aimSteps(
  reorderPoint: (input: PolicyInput) => PolicyResult,
  input: PolicyInput,
  levels: readonly number[],
  present: { level: number; reorderPoint: number | null },
  price: number | null,
): AimStep[] {
  return levels.flatMap((level) => {
    const result = reorderPoint({ ...input, serviceLevel: level })
    if (result.reorderPoint === null || result.safetyStock === null) return []
    const units = result.reorderPoint - (present.reorderPoint ?? result.reorderPoint)
    return [
      {
        level,
        reorderPoint: result.reorderPoint,
        safetyStock: result.safetyStock,
        units,
        cost: price === null ? null : units * price,
        cut: result.warnings.includes('shelf-cannot-hold'),
        now: same(level, present.level),
      },
    ]
  })
}
