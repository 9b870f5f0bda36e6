import { describe, expect, it } from 'vitest'
import { overlayBins, overlayLines } from '#src/services/overlay.ts'
import { mergeSnapshot } from '#src/services/snapshot.ts'
import { dueReason } from '#src/stores/round.ts'
import { aBin, aSnapshot, anEntry, NOW } from '#tests/support/count-factories.ts'

describe('mergeSnapshot', () => {
  const whole = aSnapshot({
    version: 7,
    bins: [aBin('1'), aBin('2'), aBin('3')],
    holds: [
      { binId: '1', quantity: 2, reason: null },
      { binId: '2', quantity: 3, reason: null },
    ],
  })
  const kept = mergeSnapshot(null, whole, NOW)

  it('replaces what belongs to the bins that came, takes tombstones away and keeps the rest', () => {
    const delta = aSnapshot({
      version: 9,
      reset: false,
      bins: [aBin('2', { onHand: 99 })],
      tombstones: ['3'],
      holds: [],
    })
    const next = mergeSnapshot(kept, delta, NOW + 1)
    expect(next.bins.map((bin) => [bin.id, bin.onHand])).toEqual([
      ['1', 14],
      ['2', 99],
    ])
    expect(next.holds.map((hold) => hold.binId)).toEqual(['1'])
    expect(next).toMatchObject({ version: 9, fetchedAt: NOW + 1 })
  })

  it('starts anew after a reset or when rights changed', () => {
    const fresh = aSnapshot({ version: 2, reset: true, bins: [aBin('5')] })
    expect(mergeSnapshot(kept, fresh, NOW).bins.map((bin) => bin.id)).toEqual(['5'])
    const other = aSnapshot({ version: 9, reset: false, bins: [aBin('5')], authzVersion: 2 })
    expect(mergeSnapshot(kept, other, NOW).bins.map((bin) => bin.id)).toEqual(['5'])
  })
})

describe('overlay', () => {
  const room = mergeSnapshot(null, aSnapshot({ bins: [aBin('1'), aBin('2')] }), NOW)
  const bin = (entries: ReturnType<typeof anEntry>[], now = NOW) => overlayBins(room, entries, now)[0]

  it('keeps a closed place quiet until its closure ends, also without a network', () => {
    const day = 86_400_000
    const iso = (ms: number): string => new Date(ms).toISOString()
    const shut = aBin('1', {
      onHand: 2,
      lastCount: { quantity: 2, effectiveAt: iso(NOW - 30 * day) },
      closed: { from: iso(NOW - day), until: iso(NOW + day) },
      states: ['ok'],
    })
    const at = (now: number) => overlayBins(mergeSnapshot(null, aSnapshot({ bins: [shut] }), NOW), [], now)[0]!
    expect(at(NOW)).toMatchObject({ states: ['ok'], closed: shut.closed })
    expect(dueReason(at(NOW), NOW)).toBeNull()
    expect(at(NOW + 2 * day).closed).toBeNull()
    expect(at(NOW + 2 * day).states).toEqual(expect.arrayContaining(['below', 'count-overdue']))
    expect(dueReason(at(NOW + 2 * day), NOW + 2 * day)).toBe('count-overdue')
  })

  it('shows a count made here until the record has it', () => {
    expect(bin([anEntry(1, 'count', { quantity: 30 })])).toMatchObject({ onHand: 30, waiting: true, under: 0 })
    expect(bin([anEntry(1, 'count', { quantity: 30 }, { state: 'acked', closedAt: NOW + 5 })])).toMatchObject({
      onHand: 30,
      waiting: false,
    })
    expect(bin([anEntry(1, 'count', { quantity: 30 }, { state: 'acked', closedAt: NOW - 5 })])?.onHand).toBe(14)
    expect(bin([anEntry(1, 'count', { quantity: 30 }, { state: 'attention' })])?.onHand).toBe(14)
  })

  it('takes the later of two counts by time, and adds what was put away after it', () => {
    const at = (minute: number) => ({ estTime: new Date(NOW + minute * 60_000).toISOString() })
    const entries = [
      anEntry(3, 'receipt', { quantity: 24, orderLineId: '70', ...at(3) }),
      anEntry(2, 'count', { quantity: 5, ...at(1) }),
      anEntry(1, 'count', { quantity: 12, ...at(2) }),
    ]
    expect(bin(entries)).toMatchObject({ onHand: 36, lastCount: { quantity: 12 } })
    expect(overlayLines(room, entries, '1')).toMatchObject([{ orderLineId: '70', units: 26 }])
  })

  it('leaves out what was taken back', () => {
    const counted = anEntry(1, 'count', { quantity: 30 })
    expect(bin([counted, anEntry(2, 'count.withdraw', { targetOpId: counted.opId })])?.onHand).toBe(14)
  })

  it('works the states out anew as time passes', () => {
    expect(bin([])?.states).toContain('below')
    expect(bin([])?.states).not.toContain('count-overdue')
    expect(bin([], NOW + 8 * 86_400_000)?.states).toContain('count-overdue')
    expect(bin([anEntry(1, 'count', { quantity: 0 })])?.states).toEqual(expect.arrayContaining(['below', 'empty']))
  })
})
