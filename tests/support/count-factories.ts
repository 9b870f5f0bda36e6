import type { Bin } from '#shared/contracts/bins.ts'
import type { Snapshot } from '#shared/contracts/counts.ts'
import type { OutboxEntry } from '#shared/stored/outbox/index.ts'

/** Noon in UTC on a Tuesday; all factories stand around it. */
export const NOW = Date.UTC(2026, 11, 1, 12)
const iso = (ms: number): string => new Date(ms).toISOString()

export function aBin(id: string, more: Partial<Bin> = {}): Bin {
  return {
    id,
    code: `U7K2M4Q9`,
    display: 'U7K2-M4Q9',
    kind: 'counted',
    overflowOf: null,
    roomId: '1',
    roomName: 'Alder supply room',
    itemId: '30',
    item: {
      id: '30',
      code: 'I-30',
      name: 'Suction catheter 14 Ch',
      unitOfUse: 'each',
      countUnit: 'each',
      ved: 'E',
    },
    bay: 'A',
    shelf: '1',
    walkOrder: Number(id) * 10,
    capacity: 200,
    packSize: 25,
    orderUnit: 'box',
    onHand: 14,
    held: 0,
    onOrder: 0,
    arrived: 0,
    position: 14,
    lastCount: { quantity: 14, effectiveAt: iso(NOW - 2 * 86_400_000) },
    reorderPoint: 20,
    parLevel: 60,
    under: 6,
    states: ['below'],
    countEveryDays: 7,
    expectedOn: null,
    closed: null,
    gap: null,
    recordsDisagree: false,
    enteredReorderPoint: null,
    enteredPar: null,
    retired: false,
    ...more,
  }
}

export function aSnapshot(more: Partial<Snapshot> = {}): Snapshot {
  return {
    roomId: '1',
    version: 1,
    reset: true,
    bins: [aBin('1'), aBin('2'), aBin('3')],
    items: [
      {
        id: '30',
        code: 'I-30',
        name: 'Suction catheter 14 Ch',
        unitOfUse: 'each',
        countUnit: 'each',
        countNote: 'Count each. An opened box counts as what is in it.',
        ved: 'E',
        orderUnit: 'box',
        packSize: 25,
        lookalikes: [],
      },
    ],
    barcodes: [{ gtin: '09520123456788', itemId: '30', level: 'each' }],
    cautions: [],
    holds: [],
    policies: [{ binId: '1', reorderPoint: 20, parLevel: 60, meanPerDay: 2, variancePerDay: 3, input: null }],
    openLines: [
      { orderLineId: '70', orderNumber: 'T-31', binId: '1', units: 50, putAway: 0, expectedOn: '2026-12-03' },
    ],
    tombstones: [],
    authzVersion: 1,
    serverTime: iso(NOW),
    ...more,
  }
}

export function anEntry(
  seq: number,
  type: string,
  op: Record<string, unknown> = {},
  more: Partial<OutboxEntry> = {},
): OutboxEntry {
  const opId = `01936f3e-7a10-7000-8000-${String(seq).padStart(12, '0')}`
  return {
    schema: 1,
    opId,
    userId: '4',
    initials: 'M.O.',
    localSeq: seq,
    state: 'queued',
    op: { opId, type, v: 1, localSeq: seq, binId: '1', estTime: iso(NOW + seq), ...op },
    label: { roomId: '1', binId: '1', binDisplay: 'U7K2-M4Q9', itemName: 'Suction catheter 14 Ch', unit: 'each' },
    savedAt: NOW + seq,
    closedAt: null,
    faults: 0,
    batchLimit: 100,
    reply: null,
    replacedBy: null,
    discardReason: null,
    ...more,
  }
}
