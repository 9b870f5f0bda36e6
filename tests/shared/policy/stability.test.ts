import { describe, expect, it } from 'vitest'
import { drawInteger, seededRandom } from '#shared/kernel/random.ts'
import { settle, type Levels } from '#shared/policy/in-force.ts'
import { computedReorderPoints } from '#shared/policy/mixture-batch.ts'
import { truthOf } from './simulated-demand.ts'
import type { TruthName } from './published-calibration.ts'

const counts = 16
const bins = 120
const nothing: Levels = { reorderPoint: null, parLevel: null, orderQuantity: null }
const levels = (reorderPoint: number): Levels => ({ reorderPoint, parLevel: reorderPoint + 20, orderQuantity: 20 })

/** The computed reorder point of every bin after each of its 16 counts, from the first on. */
function computedHistories(truthName: TruthName): number[][] {
  const truth = truthOf(truthName, 10)
  const random = seededRandom(`stability ${truthName}`)
  const inputs = Array.from({ length: bins }, () => {
    const days = Array.from({ length: counts }, () => [3, 3, 4, 4, 7][drawInteger(random, 0, 4)]!)
    const seen = truth.draw(random, days).map((quantity, i) => ({ days: days[i]!, quantity }))
    return seen.map((_, i) => ({
      intervals: seen.slice(0, i + 1),
      leadTime: { meanDays: 5 },
      serviceLevel: 0.98,
    }))
  })
  const points = computedReorderPoints(inputs.flat()) as number[]
  return inputs.map((_, bin) => points.slice(bin * counts, (bin + 1) * counts))
}

/** The figures in force when each count is settled as it comes. */
function settledHistory(computed: number[]): number[] {
  let inForce: Levels | null = null
  let lowerCounts = 0
  return computed.map((point) => {
    const before: number | null = inForce?.reorderPoint ?? null
    lowerCounts = before !== null && point < before ? lowerCounts + 1 : 0
    const now = settle({
      ...{ mode: 'calculated', cause: 'count', entered: nothing },
      ...{ inForce, computed: levels(point), lowerCounts },
    })
    if (now.reorderPoint !== before) lowerCounts = 0
    inForce = { reorderPoint: now.reorderPoint, parLevel: now.parLevel, orderQuantity: now.orderQuantity }
    return now.reorderPoint!
  })
}

const changesIn = (points: number[]): number => points.filter((point, i) => i > 0 && point !== points[i - 1]).length
const median = (values: number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]!

describe('sixteen counts from the first on', () => {
  it.each([
    ['poisson', 3],
    ['nb3', 3],
  ] as const)('%s use: the figure in force moves at most %d times in the median bin', (name, most) => {
    const truth = truthOf(name, 10)
    const computed = computedHistories(name)
    const settled = computed.map(settledHistory)
    const service = (histories: number[][]): number =>
      histories.flat().reduce((sum, point) => sum + truth.cdf(point), 0) / (bins * counts)
    expect(median(settled.map(changesIn))).toBeLessThanOrEqual(most)
    expect(median(computed.map(changesIn))).toBeGreaterThan(2 * most)
    // Standing still costs nothing: service stays within half a point of following every count.
    expect(Math.abs(service(settled) - service(computed))).toBeLessThan(0.005)
  })
})

it('the simulated truths are those of the published study: the 99 % point of each at a mean of 10', () => {
  // Statistics, 4.8, column "oracle" of the stock table (R 4.2.2).
  const oracle = { poisson: 18, nb3: 26, nb8: 41, zip: 30, lumpy: 68, bursty: 40 } as const
  for (const [name, level] of Object.entries(oracle)) {
    const { cdf } = truthOf(name as TruthName, 10)
    expect(cdf(level)).toBeGreaterThanOrEqual(0.99)
    expect(cdf(level - 1)).toBeLessThan(0.99)
  }
})
