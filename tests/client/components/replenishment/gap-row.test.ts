import { describe, expect, it } from 'vitest'
import { binFigures } from '#src/components/gauge/bin-figures.ts'
import { onHolidayLine, openRows, type GapRow } from '#src/components/replenishment/gap-row.ts'
import { gaugeWords } from '#src/i18n/en.ts'
import { aBin } from '#tests/support/count-factories.ts'

const row = (more: Partial<GapRow>): GapRow => ({
  ...aBin('1', { onHand: 14, onOrder: 10, position: 24, reorderPoint: 20, parLevel: 50 }),
  binId: '1',
  needed: 42,
  suggested: { packs: 1, packSize: 25, units: 25 },
  shelfTooSmall: false,
  inDraft: null,
  ...more,
})

describe('a place before a holiday', () => {
  it('stands on the line of what to have then, not of its reorder point', () => {
    const bin = onHolidayLine(row({}))
    expect(gaugeWords.beside(binFigures(bin))).toBe('18 under')
    expect(bin.under).toBe(18)
  })

  it('is added to a draft once', () => {
    const rows = [row({}), row({ binId: '2', inDraft: { orderId: '7', number: '451' } })]
    expect(openRows(rows).map((one) => one.binId)).toEqual(['1'])
  })
})
