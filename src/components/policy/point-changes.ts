import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PointChange } from './level-chart.ts'

/** The reorder points known of a bin, oldest first: the one in force, from the day it took over. */
export function pointChanges(policy: BinPolicy): PointChange[] {
  if (policy.reorderPoint === null) return []
  return [{ at: policy.since ? Date.parse(policy.since) : 0, value: policy.reorderPoint }]
}
