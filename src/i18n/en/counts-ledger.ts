import type { Movement, MovementType } from '#shared/contracts/bins.ts'
import { roleWords } from './common.ts'
import { quantity, signed } from './format.ts'

const typeWords: Record<MovementType, string> = {
  count: 'counted',
  receipt: 'put away',
  'transfer-in': 'moved in',
  'transfer-out': 'moved out',
  wastage: 'wasted',
  take: 'taken',
  hold: 'held',
  release: 'released from hold',
  adjust: 'adjusted',
  arrival: 'arrived in the building',
  signal: 'front bin empty',
  flag: 'flagged',
  withdraw: 'taken back',
}

const flagWords: Record<string, string> = {
  'count-differs': 'differs from another count',
  'near-movement': 'close to another entry',
  'clock-suspect': 'the clock of the phone was off',
  'item-changed': 'counted for the item before',
  'below-zero': 'the record went below zero',
  'rise-unexplained': 'a rise without a delivery',
}

export const ledgerWords = {
  title: 'What happened here',
  columns: { when: 'When', what: 'What', quantity: 'Quantity', after: 'On hand after', by: 'By', note: 'Note' },
  nothing: 'Nothing is recorded for this place yet.',
  type: (type: MovementType): string => typeWords[type],
  quantity: (m: Movement): string => {
    if (m.type === 'count') return quantity(m.quantity)
    if (m.type === 'signal' || m.type === 'flag' || m.type === 'withdraw') return ''
    return signed(m.quantity)
  },
  by: (m: Movement): string => m.byName ?? (m.byRole ? roleWords[m.byRole] : 'the system'),
  note: (m: Movement): string =>
    [m.voidedBy ? 'taken back' : null, m.reason, ...m.flags.map((flag) => flagWords[flag] ?? null)]
      .filter(Boolean)
      .join('; '),
  more: 'Show older entries',
} as const
