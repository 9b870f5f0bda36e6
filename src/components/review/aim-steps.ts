import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PriceOfLevel } from '#shared/policy/price-of-level.ts'

/** What one aim would mean for a bin, beside the point in force. Estimates. */
export interface AimStep extends Omit<PriceOfLevel, 'serviceLevel'> {
  level: number
  /** Units more (or less) than the reorder point in force. */
  units: number
  now: boolean
}

const same = (a: number, b: number): boolean => Math.abs(a - b) < 1e-9

/**
 * Works every step out with the policy's own input; nothing is sent anywhere.
 *
 * @param priceOfLevels the shared function, handed in because it is loaded only when somebody changes an aim
 */
export function aimSteps(
  priceOfLevels: (input: PolicyInput, levels: readonly number[]) => PriceOfLevel[],
  input: PolicyInput,
  levels: readonly number[],
  present: { level: number; reorderPoint: number | null },
): AimStep[] {
  return priceOfLevels(input, levels).map(({ serviceLevel: level, ...step }) => ({
    ...step,
    level,
    units: step.reorderPoint - (present.reorderPoint ?? step.reorderPoint),
    now: same(level, present.level),
  }))
}
