import { describe, expect, it } from 'vitest'
import { levelOfOdds, levelSteps, oddsOfLevel, oddsSteps } from '#shared/policy/service-level-steps.ts'

describe('service levels as odds', () => {
  it('one in 20 to one in 1,000', () => {
    expect(oddsSteps.map(levelOfOdds)).toEqual([0.95, 0.975, 0.98, 0.99, 0.995, 0.998, 0.999])
  })
  it('there and back', () => {
    for (const odds of oddsSteps) expect(oddsOfLevel(levelOfOdds(odds))).toBe(odds)
    expect(oddsOfLevel(0.9731)).toBe(37)
  })
  it('within what the hospital allows, both ends included', () => {
    expect(levelSteps(0.9, 0.999, null)).toHaveLength(7)
    expect(levelSteps(0.98, 0.995, null)).toEqual([0.98, 0.99, 0.995])
    expect(levelSteps(0.9995, 0.9999, null)).toEqual([])
  })
  it('with the present level among them, in order', () => {
    expect(levelSteps(0.98, 0.995, 0.985)).toEqual([0.98, 0.985, 0.99, 0.995])
    expect(levelSteps(0.98, 0.995, 0.99)).toEqual([0.98, 0.99, 0.995])
    expect(levelSteps(0.98, 0.995, 0.95)).toEqual([0.95, 0.98, 0.99, 0.995])
  })
})
