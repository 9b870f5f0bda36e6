import type { Operation } from '#shared/contracts/counts.ts'
import type { MovementType } from '#shared/contracts/bins.ts'

/** What an operation writes into the ledger of one bin. */
export interface OperationRow {
  part: number
  /** Which end: the bin named, or the other end of a transfer. */
  end: 'bin' | 'other'
  type: MovementType
  /** Found for a count, the signed change for the rest. */
  quantity: number
}

const one = (type: MovementType, quantity: number): OperationRow[] => [{ part: 0, end: 'bin', type, quantity }]

/**
 * Ledger rows of an operation. Takes are use: they lower the shelf and stay inside demand.
 * Withdrawals write one row per bin their target touched; `targetEnds` says which.
 */
export function operationRows(
  operation: Operation,
  targetEnds: readonly ('bin' | 'other')[] = ['bin'],
): OperationRow[] {
  switch (operation.type) {
    case 'count':
    case 'count.correct':
      return one('count', operation.quantity)
    case 'count.withdraw':
    case 'movement.withdraw':
      return targetEnds.map((end, part) => ({ part, end, type: 'withdraw', quantity: 0 }))
    case 'receipt':
      return one('receipt', operation.quantity)
    case 'arrival':
      return one('arrival', operation.quantity)
    case 'wastage':
      return one('wastage', -operation.quantity)
    case 'take':
      return one('take', -operation.quantity)
    case 'hold':
      return one('hold', -operation.quantity)
    case 'release':
      return one('release', operation.quantity)
    case 'signal':
      return one('signal', 0)
    case 'flag':
      return one('flag', 0)
    case 'transfer': {
      const out = operation.direction === 'out'
      return [
        {
          part: 0,
          end: 'bin',
          type: out ? 'transfer-out' : 'transfer-in',
          quantity: out ? -operation.quantity : operation.quantity,
        },
        {
          part: 1,
          end: 'other',
          type: out ? 'transfer-in' : 'transfer-out',
          quantity: out ? operation.quantity : -operation.quantity,
        },
      ]
    }
  }
}
