/**
 * Geometry of the shared line gauge, in pixels from the gauge's own top left. The line always stands in the middle of
 * the width, so that every gauge of a list has it at the same place; a bar is scaled by position ÷ reorder point.
 * Pure: no document, no theme. Words live in `#src/i18n/en.ts`.
 */
export interface GaugeFigures {
  /** Usable units on the shelf; null: never counted. */
  onHand: number | null
  /** Units on order and still believed. */
  onOrder: number
  /** Null: nobody has said yet when to reorder. */
  reorderPoint: number | null
  parLevel?: number | null
  /** Units held, outside the usable stock. */
  held?: number
  /** Units in a pack: the steps of a bar whose reorder point is 0. */
  packSize?: number
  /** The count is older than the room's rhythm. */
  old?: boolean
  /** Enough by the record, by expected use probably not. */
  countFirst?: boolean
  /** On this phone, not yet in the record. */
  waiting?: boolean
  /** The last count, as a dashed tick, while another number is typed. */
  last?: number | null
  /** The usual range of a count, as a bracket below the bar. */
  usual?: { from: number; to: number } | null
  /** What should stand here before a holiday, for a time only. */
  holiday?: number | null
  /** Shut for a planned time: nothing is short then. */
  closed?: boolean
}

export interface GaugeOptions {
  width: number
  /** Height of the bar. */
  bar: number
  /** Draw the bar in single units whatever the reorder point is. */
  units?: boolean
  /** Leave the gap to the line empty: the bar is a choice, not a shortage. */
  noGap?: boolean
}

export interface GaugeShape {
  lineX: number
  /** Filled pieces of what is on hand. */
  solid: string[]
  /** The end of the bar that is only on this phone. */
  waiting: string | null
  /** Open strokes: what is on order, or a bar that should be counted first. */
  outline: string[]
  /** Hatched gap up to the line. */
  hatch: string | null
  /** The crossed box of held stock: its left edge and its size. */
  heldBox: { x: number; size: number } | null
  /** Small reorder line at the start of a bar whose reorder point is 0. */
  zeroLine: boolean
  circle: { x: number; r: number } | null
  question: { x: number } | null
  par: { x: number } | null
  last: { x: number } | null
  usual: { from: number; to: number } | null
  /** Foot of the pennant at the level to have before a holiday; `beyond`: it lies past twice the line. */
  holiday: { x: number; beyond: boolean } | null
  /** Position ÷ reorder point when it is more than twice, else null. */
  times: number | null
}

const CUT = 3 // px left free on each side of the line's middle
const HATCH_GAP = 2
const OLD = { length: 26, gap: 3, slices: 3 }
const NOTCH = { width: 10, depth: 7, before: 12 }
const BREAK = { before: 26, gap: 5, slant: 5 }
const STUB = 2
/** "N under" stands so far right of the line. */
const UNDER_WORDS = 112
/** Width of the pennant of a holiday. */
export const PENNANT = 9

/** Whether a reorder point is small enough to draw every unit. */
export const drawsUnits = (reorderPoint: number | null): boolean =>
  reorderPoint !== null && reorderPoint > 0 && reorderPoint < 6

const n = (value: number): string => String(Math.round(value * 100) / 100)

/** A filled bar from a to b; the right end is a half circle, flattened where the piece is too short for one. */
function piece(a: number, b: number, h: number, round: boolean): string {
  if (!round) return `M${n(a)} 0H${n(b)}V${n(h)}H${n(a)}Z`
  const r = Math.min(h / 2, b - a)
  return `M${n(a)} 0H${n(b - r)}A${n(r)} ${n(h / 2)} 0 0 1 ${n(b - r)} ${n(h)}H${n(a)}Z`
}

/** Splits a stretch at the line, leaving 3 px free on each side of it. */
function cutAtLine(a: number, b: number, lineX: number): [number, number][] {
  if (b <= lineX) return [[a, b]]
  const right: [number, number] = [Math.max(a, lineX + CUT), Math.max(b, lineX + CUT + 2)]
  return a >= lineX - CUT ? [right] : [[a, lineX - CUT], right]
}

/** Cuts 2 px out of stretches at every whole unit. */
function cutAtUnits(stretches: [number, number][], unit: number): [number, number][] {
  if (unit < 5) return stretches
  return stretches.flatMap(([a, b]) => {
    const parts: [number, number][] = []
    let from = a
    for (let k = Math.ceil((a + 1) / unit); k * unit < b - 1; k += 1) {
      parts.push([from, k * unit - 1])
      from = k * unit + 1
    }
    parts.push([from, b])
    return parts.filter(([x, y]) => y - x > 0.5)
  })
}

/** Cuts the last 26 px in slices: the count is old. */
function cutOld(stretches: [number, number][], end: number): [number, number][] {
  const length = Math.min(OLD.length, Math.max(0, end - 4))
  const slice = (length - OLD.slices * OLD.gap) / OLD.slices
  if (slice < 1) return stretches
  return stretches.flatMap(([a, b]) => {
    const parts: [number, number][] = []
    let from = a
    for (let k = 0; k < OLD.slices; k += 1) {
      const gap = end - length + k * (slice + OLD.gap)
      if (gap + OLD.gap <= a || gap >= b) continue
      if (gap > from) parts.push([from, gap])
      from = Math.max(from, gap + OLD.gap)
    }
    if (from < b) parts.push([from, b])
    return parts
  })
}

/** A bar that runs off the right edge with two slanted gaps. */
function brokenSolid(from: number, width: number, h: number): string[] {
  const first = width - BREAK.before
  const slanted = (a: number, b: number): string =>
    `M${n(a + BREAK.slant)} 0H${n(b + BREAK.slant)}L${n(b)} ${n(h)}H${n(a)}Z`
  const second = first + BREAK.gap + 5
  return [
    `M${n(from)} 0H${n(first + BREAK.slant)}L${n(first)} ${n(h)}H${n(from)}Z`,
    slanted(first + BREAK.gap, second),
    `M${n(second + BREAK.gap + BREAK.slant)} 0H${n(width)}V${n(h)}H${n(second + BREAK.gap)}Z`,
  ]
}

/** Open strokes from a to b, interrupted at the line; the right end half round, the left end closed at the start. */
function open(a: number, b: number, h: number, lineX: number, closedLeft: boolean): string[] {
  const top = 1
  const bottom = h - 1
  const r = (h - 2) / 2
  return cutAtLine(a, b, lineX).map(([x, y], index, all) => {
    const left = closedLeft && index === 0
    const start = left ? x + 1 : x
    if (index < all.length - 1) {
      return left
        ? `M${n(y)} ${top}H${n(start)}V${n(bottom)}H${n(y)}`
        : `M${n(start)} ${top}H${n(y)}M${n(start)} ${n(bottom)}H${n(y)}`
    }
    const arc = Math.max(0, Math.min(r, y - 1 - start))
    const body = `M${n(start)} ${top}H${n(y - 1 - arc)}A${n(arc)} ${n(r)} 0 0 1 ${n(y - 1 - arc)} ${n(bottom)}H${n(start)}`
    return left ? `${body}Z` : body
  })
}

/** Open strokes that run off the right edge, broken by two slanted strokes. */
function openBroken(a: number, width: number, h: number, lineX: number, closedLeft: boolean): string[] {
  const first = width - BREAK.before
  const rails = (x: number, y: number): string => `M${n(x)} 1H${n(y)}M${n(x)} ${n(h - 1)}H${n(y)}`
  const strokes = cutAtLine(a, first, lineX).map(([x, y]) => rails(x, y))
  if (closedLeft && a < lineX) strokes.push(`M${n(a + 1)} 0V${n(h)}`)
  strokes.push(rails(first + 11, width))
  for (const x of [first - 2, first + 8]) strokes.push(`M${n(x)} ${n(h + 3)}L${n(x + 7)} -3`)
  return strokes
}

/** The gap between a bar's round end and the line, following the round end at 2 px. */
function hatchFrom(end: number, lineX: number, h: number, square: boolean): string | null {
  const start = end + (end > 0 ? HATCH_GAP : 0)
  if (lineX - start < 1) return null
  const r = h / 2
  if (square || end < r) return `M${n(start)} 0H${n(lineX)}V${n(h)}H${n(start)}Z`
  return `M${n(start - r)} 0H${n(lineX)}V${n(h)}H${n(start - r)}A${n(r)} ${n(r)} 0 0 0 ${n(start - r)} 0Z`
}

function notched(a: number, b: number, h: number): { before: string; after: string } {
  const mid = b - NOTCH.before
  const half = NOTCH.width / 2
  const depth = Math.min(NOTCH.depth, h - 3)
  return {
    before: `M${n(a)} 0H${n(mid - half)}L${n(mid)} ${n(depth)}V${n(h)}H${n(a)}Z`,
    after:
      `M${n(mid)} ${n(depth)}L${n(mid + half)} 0H${n(b - h / 2)}A${n(h / 2)} ${n(h / 2)} 0 0 1 ${n(b - h / 2)} ${n(h)}` +
      `H${n(mid)}Z`,
  }
}

const blank = (lineX: number): GaugeShape => ({
  lineX,
  solid: [],
  waiting: null,
  outline: [],
  hatch: null,
  heldBox: null,
  zeroLine: false,
  circle: null,
  question: null,
  par: null,
  last: null,
  usual: null,
  holiday: null,
  times: null,
})

/** A bin that is reordered only when it is empty: packs, with the line at the bar's own left edge. */
function packsFromLine(figures: GaugeFigures, lineX: number, width: number, h: number): GaugeShape {
  const shape = blank(lineX)
  const packs = ((figures.onHand ?? 0) + figures.onOrder) / Math.max(1, figures.packSize ?? 1)
  const start = lineX + CUT
  const step = (width - start) / 4
  const end = Math.min(width, start + packs * step)
  shape.zeroLine = true
  if (packs > 0) {
    shape.solid = cutAtUnits([[0, end - start]], step).map(([a, b], i, all) =>
      piece(a + start, b + start, h, i === all.length - 1 && end < width),
    )
  }
  return shape
}

/** The solid part: what is on hand, with its cuts, its notch or its held box. Returns where the bar ends. */
function drawOnHand(shape: GaugeShape, figures: GaugeFigures, options: GaugeOptions, scale: number): number {
  const { width, bar: h } = options
  const onHand = figures.onHand ?? 0
  const end = onHand * scale
  const square = (figures.held ?? 0) > 0
  if (end > width) {
    const [first, ...rest] = brokenSolid(shape.lineX + CUT, width, h)
    shape.solid = [piece(0, shape.lineX - CUT, h, false), first as string, ...rest]
    return width
  }
  if (onHand === 0) {
    shape.solid = [piece(0, STUB, h, false)]
    return 0
  }
  let stretches = cutAtLine(0, end, shape.lineX)
  if (options.units || drawsUnits(figures.reorderPoint)) stretches = cutAtUnits(stretches, scale)
  const last = stretches[stretches.length - 1] as [number, number]
  if (figures.waiting && last[1] - last[0] > NOTCH.before + NOTCH.width / 2) {
    const parts = notched(last[0], last[1], h)
    shape.solid = [...stretches.slice(0, -1).map(([a, b]) => piece(a, b, h, false)), parts.before]
    shape.waiting = parts.after
    return end
  }
  if (figures.old) stretches = cutOld(stretches, end)
  const pieces = stretches.map(([a, b], i) => piece(a, b, h, i === stretches.length - 1 && !square))
  if (figures.waiting) shape.waiting = pieces.pop() ?? null
  shape.solid = pieces
  return end
}

/** What is on order, continuing the bar without a gap. */
function drawOnOrder(shape: GaugeShape, options: GaugeOptions, from: number, to: number): void {
  const { width, bar: h } = options
  const start = from > h / 2 ? from - h / 2 : from
  const closedLeft = from === 0
  shape.outline =
    to > width ? openBroken(start, width, h, shape.lineX, closedLeft) : open(start, to, h, shape.lineX, closedLeft)
}

/** More marks than these nobody reads at a glance; what is left out stands in the words. */
const MOST_MARKS = 3

/** The level to have before a holiday, where it tells more than the line itself and the row has room for one mark more. */
function holidayMark(figures: GaugeFigures, shape: GaugeShape, scale: number, width: number): GaugeShape['holiday'] {
  const { holiday, reorderPoint } = figures
  if (holiday == null || holiday <= (reorderPoint ?? 0)) return null
  const bar = shape.solid.length > 0 || shape.outline.length > 0
  const others = [bar, shape.hatch, figures.onOrder > 0, figures.old, figures.held, figures.waiting, shape.question]
  if (others.filter(Boolean).length >= MOST_MARKS) return null
  const beyond = holiday * scale > width - PENNANT
  if (shape.hatch && Math.min(holiday * scale, width - PENNANT) < shape.lineX + UNDER_WORDS) return null
  return { x: beyond ? width - PENNANT : holiday * scale, beyond }
}

/** Works out every mark of one gauge. */
export function gaugeShape(figures: GaugeFigures, options: GaugeOptions): GaugeShape {
  const { width, bar: h } = options
  const lineX = width / 2
  const { reorderPoint } = figures
  if (figures.onHand === null || reorderPoint === null) return { ...blank(lineX), circle: { x: lineX, r: 7 } }
  if (reorderPoint <= 0) return packsFromLine(figures, lineX, width, h)

  const shape = blank(lineX)
  const scale = lineX / reorderPoint
  const position = figures.onHand + figures.onOrder
  if (position > 2 * reorderPoint) shape.times = position / reorderPoint
  const at = (units: number): number => Math.min(units * scale, width)

  if (figures.countFirst) {
    const end = Math.max(position * scale, h)
    shape.outline = end > width ? openBroken(0, width, h, lineX, true) : open(0, end, h, lineX, true)
    // Nobody knows the true end; the stroke stands where the bar would meet the line.
    shape.question = { x: Math.min(lineX - 10, Math.max(h, end - h)) }
  } else {
    const end = drawOnHand(shape, figures, options, scale)
    let drawnTo = end
    const held = (figures.held ?? 0) > 0 && end < width - h
    if (held) {
      shape.heldBox = { x: end + HATCH_GAP, size: h }
      drawnTo = end + HATCH_GAP + h
    }
    if (figures.onOrder > 0 && end < width) {
      const from = held ? drawnTo + HATCH_GAP : end
      drawnTo = Math.max(position * scale, from + 4)
      drawOnOrder(shape, options, from, drawnTo)
    }
    const square = held && figures.onOrder === 0
    if (position < reorderPoint && !options.noGap && !figures.closed)
      shape.hatch = hatchFrom(
        Math.max(drawnTo, figures.onHand === 0 && figures.onOrder === 0 ? STUB : 0),
        lineX,
        h,
        square || position === 0,
      )
  }
  if (figures.parLevel != null && figures.parLevel > reorderPoint && figures.parLevel <= 2 * reorderPoint) {
    shape.par = { x: at(figures.parLevel) }
  }
  shape.holiday = holidayMark(figures, shape, scale, width)
  if (shape.holiday) shape.par = null
  if (figures.last != null) shape.last = { x: at(figures.last) }
  if (figures.usual) shape.usual = { from: at(figures.usual.from), to: at(figures.usual.to) }
  return shape
}
