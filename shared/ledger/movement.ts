/** A row of the ledger, as both sides read it. `quantity`: found for a count, the signed change for the rest. */
export interface LedgerRow {
  opId: string
  /** 0 for the bin named, 1 for the other end of a transfer. */
  part: number
  type: string
  quantity: number
  /** Epoch ms at which it counts; a correction has its target's. */
  effectiveAt: number
  /** Epoch ms at which it was stated; orders corrections of one target. */
  statedAt: number
  deviceId: string
  localSeq: number
  targetOpId: string | null
  flags: readonly string[]
}

/** How a type changes usable stock; `null` changes nothing on the shelf. */
const effects: Record<string, 1 | null> = {
  receipt: 1,
  'transfer-in': 1,
  'transfer-out': 1,
  wastage: 1,
  take: 1,
  adjust: 1,
  hold: 1,
  release: 1,
  arrival: null,
  signal: null,
  flag: null,
}

/** Whether a row's signed quantity moves usable stock. Counts and withdrawals are handled by the fold itself. */
export const movesStock = (type: string): boolean => effects[type] === 1

/**
 * Total order of the ledger: effective time, then device, then the device's own sequence, then id.
 * Depends on what was recorded alone, never on the order of arrival.
 */
export function byEffect(a: LedgerRow, b: LedgerRow): number {
  return (
    a.effectiveAt - b.effectiveAt ||
    compareText(a.deviceId, b.deviceId) ||
    a.localSeq - b.localSeq ||
    compareText(a.opId, b.opId) ||
    a.part - b.part
  )
}

/** Order in which things were stated: decides between two corrections of one count. */
export function byStatement(a: LedgerRow, b: LedgerRow): number {
  return (
    a.statedAt - b.statedAt ||
    compareText(a.deviceId, b.deviceId) ||
    a.localSeq - b.localSeq ||
    compareText(a.opId, b.opId)
  )
}

function compareText(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}
