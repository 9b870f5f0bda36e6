import type { DemandPicture } from './demand-picture.ts'
import { niceStep } from './level-chart.ts'

/** Where everything of the dot picture stands. Pixels; pure. */
export interface DotGeometry {
  total: number
  height: number
  /** Where the dots stand. */
  floor: number
  /** Top of the hatching beyond the line, below its words. */
  tailTop: number
  /** The reorder point. */
  line: number
  dots: { key: string; cx: number; cy: number; r: number; beyond: boolean }[]
  ticks: { units: number; x: number; anchor: 'start' | 'middle' | 'end' }[]
  /** The level of the textbook formula, with room for its words on the side that has it; null where it is the same. */
  textbook: { x: number; wordsX: number; anchor: 'start' | 'end' } | null
}

const EDGE = 8
const TAIL_TOP = 44
const BELOW = 26
const TALLEST = 150
const BEYOND = { r: 3.6, pitch: 8 }
/** The words right of the line need this much. */
const WORDS = 92
/** … and those of the textbook mark this much. */
const TEXTBOOK_WORDS = 136

export function dotGeometry(
  picture: DemandPicture,
  point: number,
  textbook: number | null,
  width: number,
): DotGeometry {
  const total = Math.max(240, width)
  const { columns, step } = picture
  const furthest = Math.max(columns[columns.length - 1]?.upTo ?? 0, textbook ?? 0, point + 1) + step
  // The line stands far enough from the right edge for its words, however little lies beyond it.
  const highest = Math.max(furthest, ((point + step) * (total - 2 * EDGE)) / (total - 2 * EDGE - WORDS))
  const x = (units: number): number => EDGE + (units / highest) * (total - 2 * EDGE)
  const tallest = Math.max(...columns.filter((c) => c.units <= point).map((c) => c.dots), 1)
  const pitch = Math.min(8, Math.max(3.5, x(step) - x(0)), TALLEST / tallest)
  const height = Math.max(150, tallest * pitch + TAIL_TOP + BELOW + 14)
  const floor = height - BELOW
  const line = x(point + 0.5)
  const r = Math.max(0.9, Math.min(3.2, (x(step) - x(0)) / 2 - 0.35, Math.max(1.4, pitch / 2 - 0.35)))
  return {
    total,
    height,
    floor,
    tailTop: TAIL_TOP,
    line,
    dots: columns.flatMap((column) => dotsOf(column, x, floor, column.units > point ? { line } : { pitch, r })),
    ticks: ticksOf(highest, x),
    textbook: textbook === null || textbook === point ? null : textbookAt(x(textbook + 0.5), line, total),
  }
}

/** One column of dots; beyond the line they are larger and stand clear of it. */
function dotsOf(
  column: DemandPicture['columns'][number],
  x: (units: number) => number,
  floor: number,
  how: { pitch: number; r: number } | { line: number },
): DotGeometry['dots'] {
  const beyond = 'line' in how
  const middle = x((column.units + column.upTo) / 2)
  const { pitch, r } = beyond ? BEYOND : how
  return Array.from({ length: column.dots }, (_, k) => ({
    key: `${column.units}-${k}`,
    cx: beyond ? Math.max(middle, how.line + r + 2) : middle,
    cy: floor - (k + 0.5) * pitch - 1,
    r,
    beyond,
  }))
}

function ticksOf(highest: number, x: (units: number) => number): DotGeometry['ticks'] {
  const every = niceStep(highest, 5)
  return Array.from({ length: Math.floor(highest / every) + 1 }, (_, i) => ({
    units: i * every,
    x: x(i * every),
    anchor: i === 0 ? 'start' : 'middle',
  }))
}

/** Words above the mark, clear of the line and inside the picture where there is room for them. */
function textbookAt(at: number, line: number, total: number): DotGeometry['textbook'] {
  if (at < line) return { x: at, wordsX: Math.min(line - 8, Math.max(TEXTBOOK_WORDS, at + 6)), anchor: 'end' }
  return at + TEXTBOOK_WORDS <= total ? { x: at, wordsX: at, anchor: 'start' } : { x: at, wordsX: total, anchor: 'end' }
}
