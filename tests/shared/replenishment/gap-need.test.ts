import { describe, expect, it } from 'vitest'
import type { OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { computedReorderPoints } from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { gapOf, neededUnits, overGap } from '#shared/replenishment/gap-need.ts'

const at = (iso: string): number => Date.parse(iso)

describe('the gap that is near', () => {
  // In 2026 Christmas Day is a Friday; the Monday after it is closed as well.
  const stores: OrderCalendar = {
    zone: 'Europe/London',
    slots: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, cutOff: '10:00' })),
    lead: { kind: 'working', days: 1 },
    workingDays: [1, 2, 3, 4, 5],
    arrivalDays: [1, 2, 3, 4, 5],
    arrivalTime: '14:00',
    holidays: new Set(['2026-12-25', '2026-12-28']),
  }

  it('is spoken of from ten days before its last order until that order', () => {
    const gap = gapOf(stores, at('2026-12-14T09:00:00Z'))
    expect(gap).toMatchObject({
      lastOrderBy: at('2026-12-23T10:00:00Z'),
      lastArrival: at('2026-12-24T14:00:00Z'),
      nextArrival: at('2026-12-29T14:00:00Z'),
    })
    expect(gapOf(stores, at('2026-12-13T09:00:00Z'))).toBeNull()
    expect(gapOf(stores, at('2026-12-23T10:00:00Z'))).not.toBeNull()
    expect(gapOf(stores, at('2026-12-23T10:00:01Z'))).toBeNull()
  })

  it('is none without closed days, and none while only the weekend lies ahead', () => {
    expect(gapOf({ ...stores, holidays: new Set() }, at('2026-12-14T09:00:00Z'))).toBeNull()
    expect(gapOf(stores, at('2026-11-02T09:00:00Z'))).toBeNull()
  })

  it('is also made by a ward that takes no deliveries', () => {
    const closed = { ...stores, holidays: new Set<string>(), closedToDeliveries: new Set(['2026-11-10', '2026-11-11']) }
    // Wednesday's and Thursday's goods, of Monday's and Tuesday's orders, come on Thursday 12 November: from Monday, three days.
    expect(gapOf(closed, at('2026-11-05T09:00:00Z'))).toBeNull()
    const longer = { ...closed, closedToDeliveries: new Set(['2026-11-10', '2026-11-11', '2026-11-12']) }
    expect(gapOf(longer, at('2026-11-05T09:00:00Z'))).toMatchObject({
      lastArrival: at('2026-11-09T14:00:00Z'),
      nextArrival: at('2026-11-13T14:00:00Z'),
    })
  })
})

describe('what should stand there over a gap', () => {
  const input = {
    demand: { meanPerDay: 1, variancePerDay: 1 },
    method: 'poisson' as const,
    leadTime: { meanDays: 1 },
    reviewPeriodDays: 2,
    serviceLevel: 0.95,
    capacity: 5,
  }
  const day = 86_400_000
  const neededOver = (given: PolicyInput, countedAt: number, arrival: number): number => {
    const stretched = overGap(given, countedAt, arrival)
    return neededUnits(stretched, computedReorderPoints([stretched])[0] ?? null)
  }

  it('lasts from the count to the delivery after it, whatever the shelf holds', () => {
    // Tables of the Poisson distribution: mean 10, 0.9165 up to 14, 0.9513 up to 15.
    expect(neededOver(input, 0, 10 * day)).toBe(15)
    // Half as busy: mean 5, 0.9319 up to 8, 0.9682 up to 9.
    expect(neededOver({ ...input, protectionExposureDays: 1.5 }, 0, 10 * day)).toBe(9)
  })

  it('is never less than the place needs anyway, and nothing where nothing was learnt', () => {
    // Mean 3: 0.9161 up to 5, 0.9665 up to 6.
    expect(neededOver(input, 0, day)).toBe(6)
    expect(neededOver({ ...input, demand: undefined, intervals: [], method: 'auto' }, 0, 10 * day)).toBe(0)
  })
})
