import { describe, expect, it } from 'vitest'
import { useStopped } from '#shared/demand/use-stopped.ts'
import { weeks } from './weeks.ts'

const dayMs = 86_400_000
const zeros = (n: number): number[] => Array.from({ length: n }, () => 0)

describe('useStopped', () => {
  it('asks after more than 90 days on which nothing was taken', () => {
    // Twelve weeks are 84 days, thirteen 91.
    expect(useStopped(weeks([3, 2, ...zeros(12)]))).toBeNull()
    expect(useStopped(weeks([3, 2, ...zeros(13)]))).toEqual({ since: 14 * dayMs })
  })

  it('waits three times the longest gap between uses where that is longer', () => {
    // Uses five weeks apart: 35 days, so more than 105 days: sixteen weeks.
    const slow = [1, ...zeros(4), 1]
    expect(useStopped(weeks([...slow, ...zeros(15)]))).toBeNull()
    expect(useStopped(weeks([...slow, ...zeros(16)]))).toEqual({ since: 42 * dayMs })
  })

  it('starts anew with every use', () => {
    expect(useStopped(weeks([3, ...zeros(20), 1]))).toBeNull()
  })

  it('speaks of a place never used from its first count on', () => {
    expect(useStopped(weeks(zeros(13)))).toEqual({ since: 0 })
    expect(useStopped(weeks(zeros(5)))).toBeNull()
    expect(useStopped([])).toBeNull()
  })

  it('takes neither an empty shelf nor an unexplained rise for a proof', () => {
    const empty = { 8: { used: false, why: 'was-empty' as const } }
    expect(useStopped(weeks([3, ...zeros(13)], empty))).toBeNull()
    const rise = { 8: { used: false, why: 'rise-unexplained' as const, quantity: -30 } }
    expect(useStopped(weeks([3, ...zeros(13)], rise))).toBeNull()
  })
})
