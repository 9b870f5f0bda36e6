import { describe, expect, it } from 'vitest'
import { up as upDraft } from '#shared/stored/draft/index.ts'
import { up as upOutbox } from '#shared/stored/outbox/index.ts'

/** Samples as version 1 wrote them. They never change: phones in the field hold such rows. */
const outboxV1 = {
  schema: 1,
  opId: '01936f3e-7a10-7000-8000-000000000001',
  userId: '4',
  initials: 'M.O.',
  localSeq: 12,
  state: 'queued',
  op: { opId: '01936f3e-7a10-7000-8000-000000000001', v: 1, type: 'count', quantity: 12, localSeq: 12 },
  label: { roomId: '1', binId: '9', binDisplay: 'U7K2-M4Q9', itemName: 'Gauze swab', unit: 'each' },
  savedAt: 1_796_000_000_000,
  closedAt: null,
  faults: 0,
  batchLimit: 100,
  reply: null,
  replacedBy: null,
  discardReason: null,
}
const draftV1 = {
  schema: 1,
  userId: '4',
  roomId: '1',
  walk: ['9', '10'],
  scope: 'due',
  at: '10',
  done: { 9: { opId: outboxV1.opId, quantity: 12, receiptOpId: null, at: 1_796_000_000_000 } },
  skipped: [],
  knownBelow: [],
  digits: { 10: { text: '4', at: 1_796_000_000_500 } },
  startedAt: 1_796_000_000_000,
  touchedAt: 1_796_000_000_500,
  activeMs: 500,
}

describe('what devices keep', () => {
  it('reads entries and rounds of version 1 unchanged', () => {
    expect(upOutbox(outboxV1)).toEqual(outboxV1)
    expect(upDraft(draftV1)).toEqual(draftV1)
  })

  it('says so when a row was never ours', () => {
    expect(upOutbox({ ...outboxV1, state: 'lost' })).toBeNull()
    expect(upDraft({ ...draftV1, schema: 99 })).toBeNull()
    expect(upOutbox(null)).toBeNull()
  })
})
