import type { Bin } from '#shared/contracts/bins.ts'
import type { SnapshotPolicy } from '#shared/contracts/counts.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'

/** A computed policy as the page reads it. Figures of a later kind are absent from older rows. */
export type Computed = Omit<PolicyResult, LaterFigure> & LaterFigures
type LaterFigure = keyof LaterFigures
interface LaterFigures {
  /** Share of units served from the shelf. */
  fillRate?: number | null
  /** Share of time with something on the shelf. */
  readyRate?: number | null
  /** The aim a shelf that is too small can keep. */
  shelfCarries?: number | null
  /** The highest aim these counts could confirm by themselves. */
  dataCarry?: number | null
  /** Units kept only because there are few counts. */
  forFewCounts?: number | null
}

/** What "why" needs of a policy; from the record, or worked out on the phone. */
export type WhyPolicy = Pick<
  BinPolicy,
  'mode' | 'reorderPoint' | 'protection' | 'explanation' | 'intervals' | 'demandClass' | 'pool' | 'changes'
> & {
  computed: Computed | null
  input: PolicyInput | null
  target: number
  leadTimes: BinPolicy['leadTimes']
  entered: number | null
  /** Chance that one delivery cycle does not run out with the figure in force. */
  sureInForce: number | null
}

export function whyFromRecord(policy: BinPolicy, bin: Bin): WhyPolicy {
  return {
    ...policy,
    computed: policy.computed as unknown as Computed | null,
    input: policy.input as PolicyInput | null,
    target: policy.serviceLevel.target,
    entered: bin.enteredReorderPoint,
  }
}

/**
 * The same without a network, from the input the phone keeps: worked out here by the same function, so it is the same
 * to the unit. The statistics are loaded only when somebody asks. Dates and like wards by name are not on the phone.
 *
 * @returns null where the phone keeps no input
 */
export async function whyFromPhone(kept: SnapshotPolicy, bin: Bin, mode: BinPolicy['mode']): Promise<WhyPolicy | null> {
  if (!kept.input) return null
  const { reorderPoint } = await import('#shared/policy/reorder-point.ts')
  const input = kept.input as PolicyInput
  const computed = reorderPoint(input)
  return {
    mode,
    reorderPoint: kept.reorderPoint,
    protection: null,
    explanation: computed.explanation,
    intervals: [],
    demandClass: null,
    pool: null,
    changes: [],
    computed,
    input,
    target: input.serviceLevel,
    leadTimes: null,
    sureInForce: null,
    entered: bin.enteredReorderPoint,
  }
}
