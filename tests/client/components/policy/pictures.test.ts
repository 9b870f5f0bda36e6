import { describe, expect, it } from 'vitest'
import type { Movement } from '#shared/contracts/bins.ts'
import { figuresOf, pictureOf, stretchesFor } from '#src/components/policy/demand-picture.ts'
import { dotGeometry } from '#src/components/policy/dot-geometry.ts'
import { levelChart, niceStep } from '#src/components/policy/level-chart.ts'

const HOUR = 3_600_000
const start = Date.parse('2026-05-01T00:00:00.000Z')
const move = (type: Movement['type'], quantity: number, after: number, hours: number, more = {}): Movement => ({
  id: `${type}-${hours}`,
  opId: `${type}-${hours}`,
  type,
  quantity,
  onHandAfter: after,
  itemId: '1',
  effectiveAt: new Date(start + hours * HOUR).toISOString(),
  recordedAt: new Date(start + hours * HOUR).toISOString(),
  by: null,
  byName: null,
  byRole: 'nurse',
  deviceId: 'd',
  reason: null,
  targetOpId: null,
  voidedBy: null,
  flags: [],
  ...more,
})
const draw = (movements: Movement[]) =>
  levelChart({
    movements,
    points: [{ at: start, value: 10 }],
    from: start,
    to: start + 100 * HOUR,
    width: 800,
    height: 232,
    rightRoom: 118,
  })

describe('pictureOf', () => {
  it('spreads exactly 200 dots and counts those beyond the line', () => {
    // Uniform on 0..9: each number twenty times in 200.
    const picture = pictureOf((units) => Math.min(1, (units + 1) / 10), 7)
    expect(picture.columns.map((c) => c.dots)).toEqual(Array.from({ length: 10 }, () => 20))
    expect(picture.beyond).toBe(40)
  })

  it('lets no column straddle the line, however wide the columns are', () => {
    const picture = pictureOf((units) => Math.min(1, (units + 1) / 400), 307)
    expect(picture.step).toBeGreaterThan(1)
    expect(picture.columns.every((c) => c.upTo <= 307 || c.units > 307)).toBe(true)
    expect(picture.columns.reduce((sum, c) => sum + c.dots, 0)).toBe(200)
  })
})

describe('the risk in the picture', () => {
  // Uniform on 0..999: one unit in a thousand each.
  const even = (units: number): number => Math.min(1, (units + 1) / 1000)

  it('takes so many dots that a rare risk still shows one', () => {
    expect([0.2, 0.005, 0.0026].map(stretchesFor)).toEqual([200, 200, 200])
    expect(stretchesFor(0.001)).toBe(1000)
    expect(figuresOf(even, 998, 998).picture).toMatchObject({ stretches: 1000, beyond: 1 })
  })

  it('knows what the level reaches, what one unit less would, and the middle of the use', () => {
    const figures = figuresOf(even, 994, 994)
    expect(figures.reached).toBeCloseTo(0.995)
    expect(figures.short).toBeCloseTo(0.994)
    expect(figures.risk).toBeCloseTo(0.005)
    expect([figures.tenth, figures.half, figures.nineTenths]).toEqual([99, 499, 899])
    expect(figuresOf(even, 0, 0).short).toBeNull()
  })

  it('draws every dot of the risk right of the line, and no other', () => {
    for (const point of [4, 37, 640, 998]) {
      const { picture } = figuresOf(even, point, point)
      const drawn = dotGeometry(picture, point, null, 358)
      expect(drawn.dots.filter((dot) => dot.cx > drawn.line)).toHaveLength(picture.beyond)
      expect(drawn.line).toBeLessThan(358 - 80)
    }
  })
})

describe('levelChart', () => {
  it('measures a stock-out from the empty count to the next delivery', () => {
    const chart = draw([move('count', 12, 12, 1), move('count', 0, 0, 40), move('receipt', 50, 50, 67)])
    expect(chart?.outs).toHaveLength(1)
    expect(chart?.outs[0]?.hours).toBeCloseTo(27)
    expect(chart?.risers.map((r) => r.units)).toEqual([50])
  })

  it('hatches only the time below the line', () => {
    const chart = draw([move('count', 12, 12, 1), move('count', 4, 4, 40), move('receipt', 50, 54, 60)])
    expect(chart?.hatches).toHaveLength(1)
  })

  it('leaves out what was taken back and what moved nothing', () => {
    const chart = draw([move('count', 12, 12, 1), move('count', 3, 3, 5, { voidedBy: 'x' }), move('flag', 0, 12, 6)])
    expect(chart?.dots).toHaveLength(1)
  })

  it('has nothing to draw before the first entry', () => {
    expect(draw([])).toBeNull()
  })

  it('steps its axis in round numbers', () => {
    expect([3, 9, 34, 70, 480].map((top) => niceStep(top, 4))).toEqual([1, 5, 10, 20, 200])
  })
})
