import type { BinPolicy, CauseOfMove } from '#shared/contracts/policy.ts'
import type { PoolMember } from '#shared/policy/pool.ts'

/**
 * What was learnt of a bin beside its figures, as kept with its policy: looked at anew with every calculation, whether
 * or not the figures move. Instants as ISO text.
 */
export interface PolicyFacts {
  countsKept: BinPolicy['countsKept']
  demandClass: BinPolicy['demandClass']
  useStoppedSince: string | null
  questions: BinPolicy['questions']
  pool: { basis: 'item' | 'category'; ownShare: number | null } | null
  changes: BinPolicy['changes']
  leadTimes: BinPolicy['leadTimes']
  /** The planned time without use that is on or comes next; `flagsFrom`: from then on flags serve the reopening. */
  closed: { from: string; until: string | null; flagsFrom: string | null } | null
  gap: { level: number; orderBy: string; name: string } | null
  /** Usual use a day, planned extra units taken off. */
  basePerDay: number | null
  /** Days expected between counts. */
  rhythmDays: number
  /** What it tells its like; null before there is an interval. */
  member: Omit<PoolMember, 'key' | 'wardId'> | null
  /** Estimated chance that one delivery cycle does not run out with the figure in force; null where nobody can say. */
  sure: number | null
  /** What keeps the calculation apart from the figure in force; empty where it is in force. */
  pendingCauses: CauseOfMove[]
  /** What moved the figure when this row was written. */
  moved: CauseOfMove[]
}
