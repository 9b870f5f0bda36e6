import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { effectiveTime } from '#shared/ledger/effective-time.ts'
import { fold } from '#shared/ledger/fold.ts'
import type { LedgerRow } from '#shared/ledger/movement.ts'

let serial = 0
const row = (fields: Partial<LedgerRow> & Pick<LedgerRow, 'type' | 'quantity'>): LedgerRow => {
  serial += 1
  const effectiveAt = fields.effectiveAt ?? serial * 1000
  return {
    opId: `op-${serial}`,
    part: 0,
    effectiveAt,
    statedAt: effectiveAt,
    deviceId: 'phone',
    localSeq: serial,
    targetOpId: null,
    flags: [],
    ...fields,
  }
}

/** Any ledger a bin may have, with corrections and withdrawals of rows in it and of rows that never came. */
const ledger = fc
  .array(
    fc.record({
      type: fc.constantFrom(
        'count',
        'receipt',
        'take',
        'wastage',
        'transfer-out',
        'transfer-in',
        'hold',
        'release',
        'adjust',
        'correct',
        'withdraw',
        'arrival',
      ),
      quantity: fc.integer({ min: 0, max: 60 }),
      effectiveAt: fc.integer({ min: 0, max: 30 }),
      statedAt: fc.integer({ min: 0, max: 30 }),
      deviceId: fc.constantFrom('a', 'b', 'c'),
      target: fc.nat({ max: 20 }),
    }),
    { maxLength: 20 },
  )
  .map((drawn) =>
    drawn.map((d, i): LedgerRow => {
      const about = d.type === 'correct' || d.type === 'withdraw'
      const down = ['take', 'wastage', 'transfer-out', 'hold'].includes(d.type)
      return {
        opId: `op-${i}`,
        part: 0,
        type: d.type === 'correct' ? 'count' : d.type,
        quantity: down ? -d.quantity : d.quantity,
        effectiveAt: d.effectiveAt,
        statedAt: d.statedAt,
        deviceId: d.deviceId,
        localSeq: i,
        targetOpId: about && d.target !== i ? `op-${d.target}` : null,
        flags: [],
      }
    }),
  )

const summary = (rows: LedgerRow[]) => {
  const { rows: folded, ...level } = fold(rows)
  return { level, rows: folded.map((f) => [f.row.opId, f.onHandAfter, f.voidedBy]) }
}

describe('fold', () => {
  it('does not depend on the order of rows', () => {
    fc.assert(
      fc.property(
        ledger.chain((rows) => fc.tuple(fc.constant(rows), fc.shuffledSubarray(rows, { minLength: rows.length }))),
        ([rows, shuffled]) => {
          expect(summary(shuffled)).toEqual(summary(rows))
        },
      ),
      { numRuns: 500 },
    )
  })

  it('is the last standing count and what moved after it', () => {
    fc.assert(
      fc.property(ledger, (rows) => {
        const folded = fold(rows)
        const standing = folded.rows.filter((f) => f.voidedBy === null).map((f) => f.row)
        const lastCount = standing.findLastIndex((r) => r.type === 'count')
        const moves = ['receipt', 'take', 'wastage', 'transfer-in', 'transfer-out', 'hold', 'release', 'adjust']
        const after = standing.slice(lastCount + 1).filter((r) => moves.includes(r.type))
        expect(folded.onHand).toBe((standing[lastCount]?.quantity ?? 0) + after.reduce((s, r) => s + r.quantity, 0))
        expect(folded.lastCount?.opId).toBe(standing[lastCount]?.opId)
      }),
      { numRuns: 300 },
    )
  })

  it('lets at most one of a count and its corrections stand', () => {
    const first = row({ type: 'count', quantity: 120 })
    const mend = row({
      type: 'count',
      quantity: 12,
      targetOpId: first.opId,
      effectiveAt: first.effectiveAt,
      statedAt: 5_000,
    })
    const again = row({
      type: 'count',
      quantity: 13,
      targetOpId: mend.opId,
      effectiveAt: first.effectiveAt,
      statedAt: 6_000,
    })
    const folded = fold([again, first, mend])
    expect(folded.rows.filter((f) => f.voidedBy === null).map((f) => f.row.quantity)).toEqual([13])
    expect(folded.onHand).toBe(13)
  })

  it('keeps what is held across counts, since a count is of usable stock', () => {
    const rows = [
      row({ type: 'count', quantity: 20 }),
      row({ type: 'hold', quantity: -6 }),
      row({ type: 'count', quantity: 13 }),
    ]
    expect(fold(rows)).toMatchObject({ onHand: 13, held: 6 })
    expect(fold([...rows, row({ type: 'release', quantity: 6 })])).toMatchObject({ onHand: 19, held: 0 })
  })

  it('keeps a negative sum raw', () => {
    expect(fold([row({ type: 'count', quantity: 2 }), row({ type: 'take', quantity: -5 })]).onHand).toBe(-3)
  })
})

describe('effectiveTime', () => {
  const now = Date.parse('2026-11-02T12:00:00Z')
  const hour = 3_600_000

  it('keeps the phone’s estimate between its last contact and now', () => {
    const time = (estTime: number) => effectiveTime({ deviceTime: 0, estTime, lastContact: now - 5 * hour }, now)
    expect(time(now - hour)).toEqual({ effectiveAt: now - hour, suspect: false })
    expect(time(now + hour)).toEqual({ effectiveAt: now, suspect: true })
    expect(time(now - 9 * hour)).toEqual({ effectiveAt: now - 5 * hour, suspect: true })
  })

  it('says when a clock is not to be trusted, and refuses nothing', () => {
    expect(effectiveTime({ deviceTime: now - hour, offsetErrMs: 121_000 }, now).suspect).toBe(true)
    expect(effectiveTime({ deviceTime: now - 8 * 24 * hour }, now)).toEqual({
      effectiveAt: now - 8 * 24 * hour,
      suspect: true,
    })
    expect(effectiveTime({ deviceTime: now + 2_000 }, now)).toEqual({ effectiveAt: now, suspect: false })
  })
})
