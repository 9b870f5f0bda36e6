import type { Fold } from './fold.ts'
import { movesStock, type LedgerRow } from './movement.ts'

const nearMs = 10 * 60_000
const sameHourMs = 2 * 3_600_000

/** A row with who made it; the fold itself does not care. */
export interface OwnedRow extends LedgerRow {
  userId: number
}

/** Two counts may differ by this much before anybody is asked: two units or a tenth. Our choice. */
const tolerance = (quantity: number): number => Math.max(2, quantity * 0.1)

/**
 * What a person should look at about one operation, from the folded ledger that already holds it.
 * Flags never refuse anything: the entry stands.
 * @param packSize units of one pack; a rise of more than that is asked about
 */
export function operationFlags<R extends OwnedRow>(folded: Fold<R>, opId: string, packSize: number): string[] {
  const at = folded.rows.findIndex((f) => f.row.opId === opId)
  const own = folded.rows[at]
  const flags: string[] = []
  if (own && own.voidedBy === null) {
    if (own.row.type === 'count') flags.push(...countFlags(folded, at, packSize))
    else if (movesStock(own.row.type) && nearOthers(folded, at, (type) => type === 'count')) flags.push('near-movement')
  }
  if (folded.onHand < 0) flags.push('below-zero')
  return flags
}

function countFlags<R extends OwnedRow>(folded: Fold<R>, at: number, packSize: number): string[] {
  const flags: string[] = []
  const { row } = folded.rows[at]!
  const before = onHandBefore(folded, at)
  const previous = lastStandingCount(folded, at)
  if (previous && before !== null && row.quantity - before > packSize) flags.push('rise-unexplained')
  if (differs(folded, at) || differs(folded, nextStandingCount(folded, at))) flags.push('count-differs')
  if (nearOthers(folded, at, movesStock)) flags.push('near-movement')
  return flags
}

/** Whether a count and the one before it, by two people within two hours, do not agree. */
function differs<R extends OwnedRow>(folded: Fold<R>, at: number | null): boolean {
  if (at === null) return false
  const row = folded.rows[at]!.row
  const previous = lastStandingCount(folded, at)
  const before = onHandBefore(folded, at)
  if (!previous || before === null || previous.userId === row.userId) return false
  return row.effectiveAt - previous.effectiveAt <= sameHourMs && Math.abs(row.quantity - before) > tolerance(before)
}

/** The order in which entries arrive must not matter: a late count is held against the one after it too. */
function nextStandingCount<R extends LedgerRow>(folded: Fold<R>, at: number): number | null {
  const next = folded.rows.findIndex((f, i) => i > at && f.voidedBy === null && f.row.type === 'count')
  return next < 0 ? null : next
}

/** Units the record held just before row `at`; null before the first count. */
export function onHandBefore<R extends LedgerRow>(folded: Fold<R>, at: number): number | null {
  if (!lastStandingCount(folded, at)) return null
  return folded.rows[at - 1]?.onHandAfter ?? 0
}

function lastStandingCount<R extends LedgerRow>(folded: Fold<R>, at: number): R | null {
  for (let i = at - 1; i >= 0; i -= 1) {
    const f = folded.rows[i]!
    if (f.voidedBy === null && f.row.type === 'count') return f.row
  }
  return null
}

/** On one device the sequence says what came first; between two devices ten minutes may be either way round. */
function nearOthers<R extends LedgerRow>(folded: Fold<R>, at: number, matters: (type: string) => boolean): boolean {
  const { row } = folded.rows[at]!
  return folded.rows.some(
    (f) =>
      f.voidedBy === null &&
      f.row.opId !== row.opId &&
      f.row.deviceId !== row.deviceId &&
      matters(f.row.type) &&
      Math.abs(f.row.effectiveAt - row.effectiveAt) <= nearMs,
  )
}
