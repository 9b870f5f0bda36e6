import { describe, expect, it } from 'vitest'
import type { DemandEvent } from '#shared/demand/demand-events.ts'
import { demandIntervals } from '#shared/demand/demand-intervals.ts'
import { mergeOverflow } from '#shared/demand/merge-overflow.ts'

const dayMs = 86_400_000
let serial = 0
const at = (day: number, type: string, quantity: number): DemandEvent => {
  serial += 1
  return { opId: `op-${serial}`, type, quantity, effectiveAt: day * dayMs }
}

describe('mergeOverflow', () => {
  it('reads the use of both places from counts made together', () => {
    const main = [at(0, 'count', 10), at(3, 'transfer-in', 8), at(7, 'count', 6)]
    const more = [at(0.1, 'count', 40), at(3, 'transfer-out', -8), at(5, 'receipt', 20), at(7.2, 'count', 45)]
    // 50 before, 20 put away, 51 after: 19 used; the move between the two cancels itself.
    const [interval] = demandIntervals(mergeOverflow([main, more]), { packSize: 10 })
    expect(interval).toMatchObject({ quantity: 19, used: true })
    expect(interval!.days).toBeCloseTo(7.1, 9)
  })

  it('leaves out counts of the main place alone', () => {
    const main = [at(0, 'count', 10), at(4, 'count', 2), at(7, 'count', 6)]
    const more = [at(0, 'count', 40), at(7, 'count', 30)]
    expect(demandIntervals(mergeOverflow([main, more]), { packSize: 10 }).map((i) => i.quantity)).toEqual([14])
  })

  it('takes what moved between the two counts of one evening into account', () => {
    const main = [at(0, 'count', 10), at(0.2, 'receipt', 5)]
    const more = [at(0.3, 'count', 40)]
    expect(mergeOverflow([main, more]).filter((e) => e.type === 'count')).toMatchObject([
      { quantity: 55, effectiveAt: 0.3 * dayMs },
    ])
  })

  it('changes nothing without overflow places', () => {
    const main = [at(0, 'count', 10), at(1, 'take', -1)]
    expect(mergeOverflow([main])).toEqual(main)
  })
})
