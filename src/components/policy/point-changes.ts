import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PointChange } from './level-chart.ts'

/** The reorder points that were in force, oldest first; stretches without one are left out. */
export function pointChanges(policy: BinPolicy): PointChange[] {
  return [...policy.history]
    .reverse()
    .flatMap(({ reorderPoint, since }) =>
      reorderPoint === null ? [] : [{ at: Date.parse(since), value: reorderPoint }],
    )
    .filter((change, i, all) => i === 0 || change.value !== all[i - 1]?.value)
}
