import { describe, expect, it } from 'vitest'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { stretchFigures } from '#src/components/policy/demand-picture.ts'
import { cyclesPerYear } from '#shared/policy/cycles-per-year.ts'
import { whyFromPhone, type Computed, type WhyPolicy } from '#src/components/policy/why-policy.ts'
import { learningWords, policyWords, whyWords, workingWords } from '#src/i18n/en.ts'
import { aBin } from '#tests/support/count-factories.ts'

const at = { now: '2026-12-01T12:00:00.000Z', zone: 'Europe/London' }
const intervals = [3, 4, 3, 7, 3, 4, 3, 4, 3, 7].map((days, i) => ({
  days,
  quantity: days * 5 + [2, -3, 1, 0, 4][i % 5]!,
}))
const input: PolicyInput = {
  intervals,
  leadTime: { meanDays: 1.2, sdDays: 0.5 },
  reviewPeriodDays: 2,
  serviceLevel: 0.995,
  order: { packSize: 50 },
}
const protection: NonNullable<BinPolicy['protection']> = {
  countedAt: '2026-12-01T06:54:00.000Z',
  firstOrderBy: '2026-12-02T10:00:00.000Z',
  firstArrival: '2026-12-03T14:00:00.000Z',
  nextOrderBy: '2026-12-04T10:00:00.000Z',
  nextArrival: '2026-12-05T14:00:00.000Z',
  days: 4.3,
}

function whyOf(more: Partial<WhyPolicy> = {}, changed: Partial<PolicyInput> = {}): WhyPolicy {
  const given = { ...input, ...changed }
  const computed = reorderPoint(given) as Computed
  return {
    mode: 'calculated',
    reorderPoint: computed.reorderPoint,
    protection,
    explanation: computed.explanation,
    intervals: [],
    demandClass: null,
    pool: null,
    changes: [],
    computed,
    input: given,
    target: given.serviceLevel,
    leadTimes: null,
    entered: null,
    sureInForce: null,
    ...more,
  }
}

describe('why, in plain words', () => {
  it('says when an order is here, when the one after it, what goes until then, and what follows', () => {
    const why = whyOf()
    const words = whyWords.plain(why, at)
    expect(words).toEqual([
      expect.stringMatching(/^About 5(\.\d)? a day go from this place\.$/),
      'Ordered by tomorrow 10:00, it is here on Thu 3 Dec.',
      'The chance after that, Fri 4 Dec 10:00, lands on Sat 5 Dec.',
      `From the last count until then about ${Math.round(why.computed!.protectionDemand!.mean)} go; in a bad stretch, one in 200, as many as ${why.computed!.computedReorderPoint}.`,
      `So: order at ${why.reorderPoint}.`,
      'This is an estimate; facility policy comes first.',
    ])
  })

  it('does not pretend that a figure in force was worked out', () => {
    const why = whyOf({ reorderPoint: 90, mode: 'beside', entered: 90 })
    expect(whyWords.plain(why, at)).toContain(
      `That works out at ${why.computed!.reorderPoint}. In force is 90, as entered.`,
    )
    expect(whyWords.bearing(why, aBin('1'), at)).toContain('90 was entered by a person and holds.')
    const unknown = whyOf({ reorderPoint: 12 }, { intervals: [] })
    expect(whyWords.plain(unknown, at)).toEqual([
      '12 was entered by a person. There are not enough counts yet to work it out.',
    ])
    expect(whyWords.odds(unknown, null, null)).toEqual([])
  })

  it('says what bears on it only where it does', () => {
    const plain = whyOf()
    expect(whyWords.bearing(plain, aBin('1', { states: ['ok'] }), at).join(' ')).not.toMatch(
      /overdue|shelf|minimum|like ward|planned/,
    )
    const small = whyOf({}, { capacity: 60 })
    small.computed!.shelfCarries = 0.9
    expect(whyWords.plain(small, at)).toContain('With one pack coming, 60 fit on the shelf: order at 10.')
    expect(whyWords.bearing(small, aBin('1'), at)).toContain(
      'The shelf is too small for this aim: what fits lets about 1 delivery cycle in 10 run out.',
    )
    expect(whyWords.plain(whyOf({}, { pinnedFloor: 80 }), at)).toContain('With the fixed minimum: order at 80.')
    expect(whyWords.bearing(whyOf({}, { pinnedFloor: 80 }), aBin('1'), at)).toContain(
      'A fixed minimum of 80, set by a reviewer, holds it up.',
    )
    const ward = (wardId: string, own = false) => ({ wardId, name: wardId, meanPerDay: 4, own, leftOut: false })
    const helped = whyOf({
      pool: {
        basis: 'item',
        ownShare: 0.3,
        wards: [ward('1', true), ...['2', '3', '4', '5', '6', '7'].map((w) => ward(w))],
      },
      changes: [
        { id: '1', name: 'Winter beds', kind: 'factor', startsOn: '2026-12-05', endsOn: null, entered: 1.3, seen: 1.1 },
      ],
    })
    const said = whyWords
      .bearing(helped, aBin('1', { states: ['count-overdue'] }), at)
      .map((s) => s.replaceAll('\u00a0', ' '))
    expect(said).toContain('The counts here weigh 30 %, 6 like wards 70 %.')
    expect(said).toContain(
      '“Winter beds” from 5 December 2026 until further notice is part of it, planned as 30 % more; the counts show 10 % more.',
    )
    expect(said[0]).toMatch(/count is overdue/)
  })

  it('gives odds of the figure in force, and of the worked-out one beside it', () => {
    const why = whyOf({ reorderPoint: 90 })
    why.computed = { ...why.computed!, reorderPoint: 40, achieved: 0.995 }
    // 5 a day in packs of 50: 36.5 cycles a year; one in 1,000 of them is once in 27 years.
    expect(whyWords.odds(why, 0.999, cyclesPerYear(5, 50, 1))).toEqual([
      'At 90 about 1 delivery cycle in 1,000 runs out; this place about once in 27 years.',
      'At the 40 worked out it would be about 1 delivery cycle in 200.',
      expect.stringContaining('if counts keep their rhythm'),
    ])
    expect(cyclesPerYear(2, 50, 0)).toBeCloseTo(14.6)
    // Ten a day in packs of ten, a chance to order once a week: 52 orders a year, not 365.
    expect(cyclesPerYear(10, 10, 7)).toBeCloseTo(52.14, 2)
  })

  it('puts the values into the formula so that the smallest level that will do can be checked by eye', async () => {
    const why = whyOf()
    const level = why.computed!.computedReorderPoint!
    const figures = (await stretchFigures(input, level, level))!
    expect(figures.short!).toBeLessThan(0.995)
    expect(figures.reached).toBeGreaterThanOrEqual(0.995)
    const formula = workingWords.formula(figures, why.computed!, 0.995).replaceAll('\u00a0', ' ')
    expect(formula).toMatch(
      new RegExp(`P\\(use ≤ ${level - 1}\\) = 99\\.\\d+ % < 99\\.5 % ≤ P\\(use ≤ ${level}\\) = 99\\.\\d+ %$`),
    )
  })
})

describe('the formula', () => {
  it('takes as many decimals as show on which side of the aim a level lies', () => {
    const figures = { level: 54, reached: 0.98334, short: 0.979996 } as Parameters<typeof workingWords.formula>[0]
    const formula = workingWords.formula(figures, whyOf().computed!, 0.98).replaceAll('\u00a0', ' ')
    expect(formula).toContain('P(use ≤ 53) = 97.9996 % < 98 % ≤ P(use ≤ 54) = 98.334 %')
  })
})

describe('why, without a network', () => {
  it('is worked out on the phone to the unit, from the input it keeps', async () => {
    const kept = { binId: '1', reorderPoint: 40, parLevel: 90, meanPerDay: 5, variancePerDay: 8, input }
    const why = (await whyFromPhone(kept, aBin('1'), 'calculated'))!
    expect(why.computed).toEqual(reorderPoint(input))
    expect(why.reorderPoint).toBe(40)
    expect(whyWords.plain(why, at).join(' ')).toContain(`works out at ${reorderPoint(input).reorderPoint}`)
    expect(whyWords.plain(why, at).join(' ')).toContain('it has to last 3.2 days')
    expect(await whyFromPhone({ ...kept, input: null }, aBin('1'), 'calculated')).toBeNull()
  })
})

describe('what moved it, and what is asked', () => {
  it('gives the sizes of two bins, and says when the shelf is too small for both', () => {
    const size = { perBin: 40, front: 40, reserve: 40, total: 80, equal: true, fits: false }
    expect(whyWords.twoBin(size, aBin('1', { kind: 'two-bin', capacity: 60 }))).toBe(
      'As two bins it works out at 40 in each, ordered when the front one is empty. Together they need room for 80; 60 fit.',
    )
    expect(whyWords.twoBin({ ...size, front: 50, total: 90, equal: false, fits: true }, aBin('1'))).toBe(
      'As two bins it works out at 50 in front and 40 in reserve, ordered when the front one is empty.',
    )
  })

  it('splits a move into its parts', () => {
    const causes = [
      { what: 'use', units: 3 },
      { what: 'rhythm', units: 4, from: 1, to: 3 },
      { what: 'limits', units: -1 },
    ]
    expect(policyWords.causes(causes)).toBe(
      'use +3, counts every 3 days instead of daily +4, shelf, pack or fixed minimum −1',
    )
    expect(policyWords.causes([{ what: 'days', units: -5, from: 10.2, to: 8 }])).toBe(
      '8 days to cover instead of 10.2 days −5',
    )
  })

  it('says for whom a figure waits', () => {
    expect(policyWords.waits('three-counts', aBin('1'))).toContain('three counts')
    expect(policyWords.waits('a-person', aBin('1'))).toContain('coordinator')
    const vital = aBin('1', { item: { ...aBin('1').item!, ved: 'V' } })
    expect(policyWords.waits('a-person', vital)).toContain('reviewer')
    expect(policyWords.waits('a-person', vital)).not.toContain('coordinator')
  })

  it('asks about a stretch by the days of the hospital', () => {
    const question = { closingOpId: 'a', from: '2026-05-03T06:00:00.000Z', to: '2026-05-09T23:30:00.000Z' }
    expect(learningWords.question({ ...question, quantity: 96, expected: 20.4 }, at)).toBe(
      'Between 3 and 10 May 96 went, about 20 would be usual. What was it?',
    )
  })
})
