import type { OrderState } from '#shared/contracts/replenishment.ts'

/** Units of one line: ordered, put away on the shelf, cancelled. */
export interface LineProgress {
  units: number
  receivedUnits: number
  cancelledUnits: number
}

/** Units still to come. */
export const openUnitsOf = (line: LineProgress): number =>
  Math.max(0, line.units - line.receivedUnits - line.cancelledUnits)

/**
 * The state people see. What a person decided is stored (draft, sent, acknowledged, cancelled); how far a delivery has
 * come is read from the ledger, so it cannot disagree with it.
 */
export function orderStateOf(decided: OrderState, lines: readonly LineProgress[]): OrderState {
  if (decided !== 'sent' && decided !== 'acknowledged') return decided
  if (lines.length > 0 && lines.every((l) => openUnitsOf(l) === 0)) return 'closed'
  return lines.some((l) => l.receivedUnits > 0) ? 'part-received' : decided
}
