import { byEffect, byStatement, movesStock, type LedgerRow } from './movement.ts'

/** What the ledger says of one bin under one assignment. Units of use. */
export interface Level {
  /** Raw: below zero when records disagree. Shown as 0 with the words for it. */
  onHand: number
  held: number
  lastCount: { quantity: number; effectiveAt: number; opId: string } | null
}

/** One row with what it left on the shelf and whether it still stands. */
export interface FoldedRow<R extends LedgerRow = LedgerRow> {
  row: R
  onHandAfter: number
  /** The operation that took its place or took it back; null while it stands. */
  voidedBy: string | null
}

export interface Fold<R extends LedgerRow = LedgerRow> extends Level {
  /** In effective order, oldest first. */
  rows: FoldedRow<R>[]
}

/**
 * Folds the rows of one bin under one assignment, in any order, into its level.
 *
 * on hand = last standing count by (effective time, device, sequence) + standing movements after it.
 * A correction stands in its target's place, the latest stated one wins; withdrawing a count takes its corrections
 * with it, withdrawing a correction lets the one before stand again. Holds are kept across counts: a count is of
 * usable stock.
 */
export function fold<R extends LedgerRow>(rows: readonly R[]): Fold<R> {
  const voided = voids(rows)
  const ordered = [...rows].sort(byEffect)
  let onHand = 0
  let held = 0
  let lastCount: Level['lastCount'] = null
  const folded = ordered.map((row) => {
    const voidedBy = voided.get(key(row)) ?? null
    if (voidedBy === null) {
      if (row.type === 'count') {
        onHand = row.quantity
        lastCount = { quantity: row.quantity, effectiveAt: row.effectiveAt, opId: row.opId }
      } else if (movesStock(row.type)) {
        onHand += row.quantity
        if (row.type === 'hold' || row.type === 'release') held = Math.max(0, held - row.quantity)
      }
    }
    return { row, onHandAfter: onHand, voidedBy }
  })
  return { onHand, held, lastCount, rows: folded }
}

const key = (row: LedgerRow): string => `${row.opId}/${row.part}`

/** Which rows no longer stand, and by whose doing. */
function voids(rows: readonly LedgerRow[]): Map<string, string> {
  const withdrawnBy = new Map<string, LedgerRow>()
  const byId = new Map<string, LedgerRow>()
  for (const row of rows) {
    if (row.part === 0) byId.set(row.opId, row)
    if (row.type !== 'withdraw' || row.targetOpId === null) continue
    const earlier = withdrawnBy.get(row.targetOpId)
    if (!earlier || byStatement(row, earlier) < 0) withdrawnBy.set(row.targetOpId, row)
  }
  const chains = new Map<string, LedgerRow[]>()
  for (const row of rows) {
    if (row.type !== 'count') continue
    const root = rootOf(row, byId)
    const chain = chains.get(root)
    if (chain) chain.push(row)
    else chains.set(root, [row])
  }
  const voided = new Map<string, string>()
  for (const row of rows) {
    const by = withdrawnBy.get(row.opId)
    if (by && row.type !== 'withdraw') voided.set(key(row), by.opId)
  }
  for (const [root, chain] of chains) settleChain(root, chain, withdrawnBy, voided)
  return voided
}

/** A count and its corrections: one stands at most. */
function settleChain(
  root: string,
  chain: LedgerRow[],
  withdrawnBy: Map<string, LedgerRow>,
  voided: Map<string, string>,
): void {
  if (chain.length === 1) return
  const rootGone = withdrawnBy.get(root)
  const candidates = chain.filter((row) => !withdrawnBy.has(row.opId) && !rootGone)
  const standing = candidates.reduce<LedgerRow | null>(
    (best, row) => (!best || later(row, best, root) ? row : best),
    null,
  )
  for (const row of chain) {
    if (row === standing || voided.has(key(row))) continue
    voided.set(key(row), rootGone?.opId ?? standing?.opId ?? row.opId)
  }
}

/** The root is the oldest statement of its chain, whatever the clocks say. */
function later(row: LedgerRow, best: LedgerRow, root: string): boolean {
  if (best.opId === root) return true
  if (row.opId === root) return false
  return byStatement(row, best) > 0
}

function rootOf(row: LedgerRow, byId: Map<string, LedgerRow>): string {
  let at = row
  for (let steps = 0; at.targetOpId !== null && steps < 100; steps += 1) {
    const target = byId.get(at.targetOpId)
    if (!target) return at.targetOpId
    at = target
  }
  return at.opId
}
