import { describe, expect, it } from 'vitest'
import { blendLeadTimes, leadTimeObservation, type LineArrival } from '#shared/demand/lead-times.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

const came = (at: number, quantity: number, more: Partial<LineArrival> = {}): LineArrival => ({
  way: 'put-away',
  at,
  quantity,
  byRiseQuestion: false,
  ...more,
})
const line = (...arrivals: LineArrival[]) => ({ sentAt: 100, units: 40, cancelledUnits: 0, arrivals })

describe('when an order line had come', () => {
  it('is when nine tenths had come', () => {
    expect(leadTimeObservation(line(came(300, 20), came(400, 15), came(500, 1), came(900, 4)))).toEqual({
      arrivedAt: 500,
    })
    expect(leadTimeObservation(line(came(300, 20), came(400, 15)))).toBeNull()
  })

  it('does not wait for what was cancelled, and knows nothing of a line cancelled whole', () => {
    const short = line(came(300, 27))
    expect(leadTimeObservation({ ...short, cancelledUnits: 10 })).toEqual({ arrivedAt: 300 })
    expect(leadTimeObservation({ ...short, cancelledUnits: 40, arrivals: [] })).toBeNull()
  })

  it('goes by arrival or putting away, whichever got there first, and never adds the two up', () => {
    const arrived = came(200, 40, { way: 'arrival' })
    expect(leadTimeObservation(line(arrived, came(300, 40)))).toEqual({ arrivedAt: 200 })
    expect(leadTimeObservation(line(came(200, 20, { way: 'arrival' }), came(300, 20)))).toBeNull()
  })

  it('uses effective time, whatever was keyed first, and nothing a rise wrote', () => {
    expect(leadTimeObservation(line(came(500, 20), came(300, 20)))).toEqual({ arrivedAt: 500 })
    expect(leadTimeObservation(line(came(300, 40, { byRiseQuestion: true })))).toBeNull()
    expect(leadTimeObservation(line(came(90, 40)))).toBeNull()
  })
})

describe('lead times for a policy', () => {
  const stated = { meanDays: 2, sdDays: 1 }

  it('are none without deliveries', () => {
    expect(blendLeadTimes([], stated, 0.98)).toEqual([])
  })

  it('lie around the stated time, to the half day, none below 0', () => {
    const delays = Array.from({ length: 20 }, (_, i) => [0.2, 0.3, -1.1, -5][i % 4]!)
    expect(blendLeadTimes(delays, stated, 0.95).slice(0, 4)).toEqual([2, 2.5, 1, 0])
  })

  it('take the newest sixty, newest first', () => {
    const delays = Array.from({ length: 70 }, (_, i) => (i < 60 ? 0 : 9))
    expect(blendLeadTimes(delays, stated, 0.98)).toEqual(Array.from({ length: 60 }, () => 2))
  })

  it('are filled up with the stated one below five, and with one bad delivery below 1 in 1 − p', () => {
    expect(blendLeadTimes([1, 0], stated, 0.98)).toEqual([3, 2, 2, 2, 2, 4])
    expect(blendLeadTimes([6, 0, 0, 0, 0], stated, 0.98)).toEqual([8, 2, 2, 2, 2, 8])
    const zeros = (n: number): number[] => Array.from({ length: n }, () => 0)
    expect(blendLeadTimes(zeros(19), stated, 0.95)).toHaveLength(20)
    expect(blendLeadTimes(zeros(20), stated, 0.95)).toHaveLength(20)
  })

  it('give the exact mixture: one day nine times in ten, else seven', () => {
    // Statistics 1.2, aux B, in R: Poisson 10 a day, promised 95 %: 70. By hand: 0.9 + 0.1 F(r; 70) ≥ 0.95.
    const delays = Array.from({ length: 20 }, (_, i) => (i % 10 === 0 ? 6 : 0))
    const observedDays = blendLeadTimes(delays, { meanDays: 1, sdDays: 0 }, 0.95)
    const got = reorderPoint({
      demand: { meanPerDay: 10 },
      leadTime: { meanDays: 1, observedDays },
      serviceLevel: 0.95,
      method: 'poisson',
    })
    expect(got.reorderPoint).toBe(70)
  })
})
