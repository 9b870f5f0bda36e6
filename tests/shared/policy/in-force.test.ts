import { describe, expect, it } from 'vitest'
import { settle, type Levels, type Settlement } from '#shared/policy/in-force.ts'
import { levelOfOdds, levelSteps, oddsOfLevel } from '#shared/policy/service-level-steps.ts'

const levels = (reorderPoint: number | null): Levels => ({
  reorderPoint,
  parLevel: reorderPoint === null ? null : reorderPoint + 50,
  orderQuantity: 50,
})
const none = levels(null)
const given = (more: Partial<Settlement>): Settlement => ({
  mode: 'calculated',
  inForce: levels(30),
  computed: levels(30),
  entered: { reorderPoint: null, parLevel: null, orderQuantity: null },
  cause: 'count',
  lowerCounts: 0,
  ...more,
})

describe('settle', () => {
  it('stands still for small rises and moves for 10 % and 2 units', () => {
    expect(settle(given({ computed: levels(31) }))).toMatchObject({
      reorderPoint: 30,
      changed: false,
      pending: { reorderPoint: 31, waitsFor: 'larger-change' },
    })
    expect(settle(given({ computed: levels(33) }))).toMatchObject({ reorderPoint: 33, changed: true, pending: null })
    expect(settle(given({ inForce: levels(5), computed: levels(6) }))).toMatchObject({ reorderPoint: 5 })
  })

  it('moves lower only when three counts in a row agree', () => {
    for (const lowerCounts of [1, 2]) {
      expect(settle(given({ computed: levels(20), lowerCounts }))).toMatchObject({
        reorderPoint: 30,
        pending: { waitsFor: 'three-counts' },
      })
    }
    expect(settle(given({ computed: levels(20), lowerCounts: 3 }))).toMatchObject({ reorderPoint: 20, changed: true })
    expect(settle(given({ computed: levels(27), lowerCounts: 3 }))).toMatchObject({ reorderPoint: 27 })
    for (const small of [levels(28), levels(29)])
      expect(settle(given({ computed: small, lowerCounts: 9 }))).toMatchObject({
        reorderPoint: 30,
        pending: { waitsFor: 'larger-change' },
      })
  })

  it.each(['service-level', 'calendar', 'rhythm', 'mode'] as const)(
    'follows a change of %s at once, both ways',
    (cause) => {
      expect(settle(given({ computed: levels(29), cause }))).toMatchObject({ reorderPoint: 29 })
      expect(settle(given({ computed: levels(31), cause }))).toMatchObject({ reorderPoint: 31 })
    },
  )

  it('goes below what a person entered only with a person’s yes', () => {
    const entered = { reorderPoint: 40, parLevel: 60, orderQuantity: 20 }
    const start = given({ inForce: null, entered, computed: levels(25), cause: 'nightly' })
    expect(settle(start)).toMatchObject({ reorderPoint: 40, pending: { reorderPoint: 25, waitsFor: 'a-person' } })
    expect(settle({ ...start, inForce: entered, cause: 'count', lowerCounts: 9 })).toMatchObject({ reorderPoint: 40 })
    expect(settle({ ...start, inForce: entered, cause: 'mode' })).toMatchObject({ reorderPoint: 25 })
    expect(settle({ ...start, inForce: entered, cause: 'service-level' })).toMatchObject({ reorderPoint: 25 })
    expect(settle(given({ inForce: levels(25), entered, computed: levels(25), cause: 'entered' }))).toMatchObject({
      reorderPoint: 40,
    })
    expect(settle({ ...start, computed: levels(45) })).toMatchObject({ reorderPoint: 45 })
  })

  it('keeps entered levels as before and beside, and says what was worked out', () => {
    const entered = { reorderPoint: 40, parLevel: 60, orderQuantity: 20 }
    expect(settle(given({ mode: 'as-before', entered }))).toMatchObject({ reorderPoint: 40, pending: null })
    expect(settle(given({ mode: 'beside', entered }))).toMatchObject({
      reorderPoint: 40,
      pending: { reorderPoint: 30, waitsFor: 'a-person' },
    })
    expect(settle(given({ mode: 'as-before', computed: none }))).toMatchObject({ reorderPoint: null })
    expect(settle(given({ mode: 'as-before' }))).toMatchObject({ reorderPoint: 30 })
  })
})

describe('odds', () => {
  it('go to levels and back', () => {
    expect([20, 50, 200, 1000].map(levelOfOdds)).toEqual([0.95, 0.98, 0.995, 0.999])
    expect([0.95, 0.975, 0.995, 0.999].map(oddsOfLevel)).toEqual([20, 40, 200, 1000])
  })

  it('stay inside the hospital’s limits and show the present level', () => {
    expect(levelSteps(0.96, 0.995, null)).toEqual([0.975, 0.98, 0.99, 0.995])
    expect(levelSteps(0.96, 0.995, 0.985)).toEqual([0.975, 0.98, 0.985, 0.99, 0.995])
  })
})
