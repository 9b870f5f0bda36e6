import type { BinState } from '#shared/contracts/bins.ts'

const dayMs = 86_400_000

/** What the states of a bin are decided from. Units of use; epoch ms. */
export interface BinFacts {
  kind: 'counted' | 'two-bin' | 'fixed-set'
  isOverflow: boolean
  hasItem: boolean
  onHand: number
  held: number
  onOrder: number
  hasLateOrder: boolean
  lastCount: { quantity: number; effectiveAt: number } | null
  reorderPoint: number | null
  /** Estimated use per day; null when unknown. */
  meanPerDay: number | null
  countEveryDays: number
  /** The place is shut for a planned time: no counts are due and nothing is flagged. */
  isQuiet?: boolean
}

/** Position = on hand + on order still believed. Source: any stock-control text; see README "Words". */
export const position = (facts: Pick<BinFacts, 'onHand' | 'onOrder'>): number => facts.onHand + facts.onOrder

/** Units missing up to the reorder point. */
export const under = (facts: Pick<BinFacts, 'onHand' | 'onOrder' | 'reorderPoint'>): number =>
  facts.reorderPoint === null ? 0 : Math.max(0, facts.reorderPoint - position(facts))

/** All states that hold at `now` (epoch ms): predicates, several at once, never stored. */
export function binStatesOf(facts: BinFacts, now: number): BinState[] {
  const states: BinState[] = []
  const counted = facts.lastCount !== null
  const pos = position(facts)
  const isQuiet = facts.isQuiet ?? false
  const below = counted && facts.reorderPoint !== null && !facts.isOverflow && !isQuiet && pos <= facts.reorderPoint
  if (below) states.push('below')
  else if (counted) states.push('ok')
  if (counted && facts.lastCount?.quantity === 0 && facts.onHand <= 0) states.push('empty')
  if (!counted && facts.hasItem) states.push('never-counted')
  if (counted && !below && !isQuiet && runsShort(facts, pos, now)) states.push('count-first')
  if (counted && !isQuiet && now - (facts.lastCount?.effectiveAt ?? now) > facts.countEveryDays * dayMs)
    states.push('count-overdue')
  if (facts.onOrder > 0) states.push('on-order')
  if (facts.hasLateOrder) states.push('late-order')
  if (facts.held > 0) states.push('held')
  return states
}

/** Enough by the record, but probably not once the use since the last count is taken off. */
function runsShort(facts: BinFacts, pos: number, now: number): boolean {
  if (facts.reorderPoint === null || facts.meanPerDay === null || facts.isOverflow || !facts.lastCount) return false
  const days = Math.max(0, now - facts.lastCount.effectiveAt) / dayMs
  return pos - facts.meanPerDay * days <= facts.reorderPoint
}
