import { describe, expect, it } from 'vitest'
import { gaugeShape, type GaugeFigures } from '#src/components/gauge/gauge-geometry.ts'

const width = 374
const line = width / 2
const figures = (more: Partial<GaugeFigures>): GaugeFigures => ({ onHand: 14, onOrder: 0, reorderPoint: 20, ...more })
const draw = (more: Partial<GaugeFigures>, options = {}) => gaugeShape(figures(more), { width, bar: 12, ...options })
/** The x coordinates of a path's straight points. */
const xs = (path: string): number[] => [...path.matchAll(/[MHL](-?[0-9.]+)/g)].map((m) => Number(m[1]))
const end = (path: string): number => Math.max(...xs(path))

describe('gaugeShape', () => {
  it('puts the line in the middle whatever the reorder point is', () => {
    for (const reorderPoint of [1, 7, 20, 900]) expect(draw({ reorderPoint }).lineX).toBe(line)
  })

  it('ends the bar at position ÷ reorder point of the way to the line', () => {
    const shape = draw({ onHand: 10 })
    // The last straight point stands half a bar before the round end.
    expect(end(shape.solid[0] as string)).toBeCloseTo(line / 2 - 6, 1)
    expect(shape.solid).toHaveLength(1)
  })

  it('hatches from 2 px after the round end up to the line, only when the position is under it', () => {
    expect(end(draw({ onHand: 10 }).hatch as string)).toBeCloseTo(line, 1)
    expect(draw({ onHand: 20 }).hatch).toBeNull()
    expect(draw({ onHand: 10, onOrder: 10 }).hatch).toBeNull()
    expect(draw({ onHand: 10, onOrder: 9 }).hatch).not.toBeNull()
  })

  it('leaves 3 px free on each side of the line where the bar passes it', () => {
    const [before, after] = draw({ onHand: 30 }).solid as [string, string]
    expect(end(before)).toBeCloseTo(line - 3, 1)
    expect(Math.min(...xs(after))).toBeCloseTo(line + 3, 1)
  })

  it('continues the bar with an open outline for what is on order, and starts the gap after it', () => {
    const shape = draw({ onHand: 5, onOrder: 5 })
    expect(shape.outline).toHaveLength(1)
    expect(end(shape.outline[0] as string)).toBeGreaterThan(line / 2 - 8)
    expect(Math.min(...xs(shape.hatch as string))).toBeGreaterThan(line / 2 - 8)
  })

  it('keeps a stub and a closed outline where the shelf is empty and an order is out', () => {
    const shape = draw({ onHand: 0, onOrder: 12 })
    expect(shape.solid).toEqual(['M0 0H2V12H0Z'])
    expect(shape.outline[0]).toMatch(/Z$/)
  })

  it('never moves the line for a bar past twice it, and breaks the bar instead', () => {
    const shape = draw({ onHand: 64 })
    expect(shape.lineX).toBe(line)
    expect(shape.times).toBeCloseTo(3.2)
    expect(shape.solid.length).toBeGreaterThan(3)
    expect(Math.max(...shape.solid.map(end))).toBe(width)
  })

  it('draws a reorder point under 6 in single units', () => {
    expect(draw({ onHand: 3, reorderPoint: 4 }).solid).toHaveLength(3)
    expect(draw({ onHand: 3, reorderPoint: 6 }).solid).toHaveLength(1)
  })

  it('cuts the end of an old count into slices', () => {
    expect(draw({ onHand: 14, old: true }).solid).toHaveLength(4)
  })

  it('shows held stock as a box after a square end, and starts the gap behind it', () => {
    const shape = draw({ onHand: 10, held: 3 })
    expect(shape.heldBox).toEqual({ x: line / 2 + 2, size: 12 })
    expect(shape.solid[0]).not.toContain('A')
    expect(Math.min(...xs(shape.hatch as string))).toBeGreaterThan(line / 2 + 14)
  })

  it('marks the end that is only on this phone', () => {
    const shape = draw({ onHand: 14, waiting: true })
    expect(shape.waiting).not.toBeNull()
    expect(draw({ onHand: 14 }).waiting).toBeNull()
  })

  it('draws a circle on the line and no bar without a count, or without a reorder point', () => {
    for (const shape of [draw({ onHand: null }), draw({ reorderPoint: null })]) {
      expect(shape.circle).toEqual({ x: line, r: 7 })
      expect(shape.solid).toHaveLength(0)
    }
  })

  it('starts a bar of reorder point 0 at the line, in packs', () => {
    const shape = draw({ onHand: 100, reorderPoint: 0, packSize: 50 })
    expect(shape.zeroLine).toBe(true)
    expect(shape.solid).toHaveLength(2)
    expect(Math.min(...shape.solid.flatMap(xs))).toBeGreaterThanOrEqual(line)
  })

  it('puts the level for a holiday where it belongs, in the place of par, and never under the words', () => {
    expect(draw({ onHand: 26, holiday: 30, parLevel: 38 })).toMatchObject({ holiday: { x: 1.5 * line }, par: null })
    expect(draw({ onHand: 26, holiday: 90 }).holiday).toMatchObject({ beyond: true })
    expect(draw({ onHand: 26, holiday: 18 }).holiday).toBeNull()
    // "6 under" stands right of the line.
    expect(draw({ onHand: 14, holiday: 30 }).holiday).toBeNull()
  })

  it('draws at most three marks: a holiday is then in the words only', () => {
    expect(draw({ onHand: 18, onOrder: 6, holiday: 30 }).holiday).not.toBeNull()
    expect(draw({ onHand: 18, onOrder: 6, old: true, holiday: 30 }).holiday).toBeNull()
  })

  it('hatches nothing while a place is closed', () => {
    expect(draw({ onHand: 3, closed: true }).hatch).toBeNull()
  })

  it('draws the par pole only up to twice the line', () => {
    expect(draw({ parLevel: 30 }).par?.x).toBeCloseTo(1.5 * line)
    expect(draw({ parLevel: 41 }).par).toBeNull()
  })
})
