import { describe, expect, it } from 'vitest'
import { gaugeWords, narrowCaption, rowWords } from '#src/i18n/en.ts'
import { aBin } from '#tests/support/count-factories.ts'

const at = { now: '2026-12-02T10:00:00.000Z', zone: 'Europe/London' }
const yesterday = { quantity: 14, effectiveAt: '2026-12-01T06:10:00.000Z' }

describe('the gauge in words', () => {
  it('says the whole gauge as one sentence', () => {
    expect(gaugeWords.alternative({ onHand: 14, onOrder: 0, reorderPoint: 20 })).toBe(
      '14 on hand, none on order, reorder point 20, 6 under',
    )
    expect(gaugeWords.alternative({ onHand: 10, onOrder: 10, reorderPoint: 20, held: 2, old: true })).toBe(
      '10 on hand, 10 on order, reorder point 20, at its point, 2 held, old count',
    )
    expect(gaugeWords.alternative({ onHand: null, onOrder: 0, reorderPoint: 10 })).toBe(
      'never counted, reorder point 10',
    )
    expect(gaugeWords.alternative({ onHand: 14, onOrder: 0, reorderPoint: 20, closed: true })).toBe(
      '14 on hand, none on order, reorder point 20, closed',
    )
    expect(gaugeWords.alternative({ onHand: 24, onOrder: 0, reorderPoint: 20, holiday: 42 })).toContain(
      '42 before the holidays',
    )
  })

  it('says what holds for a time only, by the hospital’s own days', () => {
    const gap = { level: 42, orderBy: '2026-12-23T10:00:00.000Z', name: 'Christmas' }
    expect(gaugeWords.passing({ closed: null, gap }, at)).toBe('42 by Wed 23 Dec for Christmas')
    // Midnight of 3 May in London is the evening before in UTC.
    const closed = { from: '2026-12-01T00:00:00.000Z', until: '2027-05-02T23:00:00.000Z' }
    expect(gaugeWords.passing({ closed, gap }, at)).toBe('closed until 3 May')
    expect(gaugeWords.passing({ closed: { ...closed, until: null }, gap: null }, at)).toBe(
      'closed until further notice',
    )
    expect(gaugeWords.passing({ closed: null, gap: null }, at)).toBeNull()
  })

  it('puts "N under" beside the line only when the bar stops short of it', () => {
    expect(gaugeWords.beside({ onHand: 14, onOrder: 0, reorderPoint: 20 })).toBe('6 under')
    expect(gaugeWords.beside({ onHand: 20, onOrder: 0, reorderPoint: 20 })).toBe('at its point')
    expect(gaugeWords.beside({ onHand: 24, onOrder: 0, reorderPoint: 20 })).toBeNull()
    expect(gaugeWords.beside({ onHand: 24, onOrder: 0, reorderPoint: 20, countFirst: true })).toBeNull()
  })
})

describe('a row, by role', () => {
  it('tells ward staff facts and keeps the reorder point for the page of the place', () => {
    const low = rowWords(aBin('1', { lastCount: yesterday }), 'nurse', at)
    expect(low).toMatchObject({ beside: 'order due', besideTone: 'below', left: 'counted yesterday', right: null })
    const enough = rowWords(aBin('1', { onHand: 30, position: 30, under: 0, states: ['ok'] }), 'nurse', at)
    expect(enough).toMatchObject({ beside: null, right: 'enough' })
    const coming = rowWords(
      aBin('1', {
        onHand: 0,
        onOrder: 10,
        position: 10,
        reorderPoint: 20,
        expectedOn: '2026-12-04',
        states: ['below', 'empty', 'on-order'],
      }),
      'nurse',
      at,
    )
    expect(coming).toMatchObject({ beside: 'empty', right: 'due Fri' })
  })

  it('tells the coordinator how many under and what is coming to an empty place', () => {
    const words = rowWords(
      aBin('1', {
        onHand: 0,
        onOrder: 50,
        position: 50,
        reorderPoint: 60,
        expectedOn: '2026-12-03',
        states: ['below', 'empty'],
      }),
      'coordinator',
      at,
    )
    expect(words).toMatchObject({ beside: '10 under', right: 'Empty, 50 due tomorrow', left: 'reorder at 60' })
  })

  it('says what is on this phone before anything else', () => {
    const words = rowWords(aBin('1', { held: 6 }), 'coordinator', at, { waiting: true })
    expect(words).toMatchObject({ right: 'on this phone', rightTone: 'on-phone' })
  })

  it('has no number and says so where nothing was ever counted', () => {
    const bin = aBin('1', { lastCount: null, onHand: 0, states: ['never-counted'] })
    const words = rowWords(bin, 'reviewer', at)
    expect(words).toMatchObject({ onHand: null, beside: 'never counted' })
    expect(narrowCaption(words, bin)).toBe('never counted')
  })
})
