import type { Movement } from '#shared/contracts/bins.ts'

/** Geometry of "level over time": steps, counts, receipts, time below the line, stock-outs. Pixels; pure. */
export interface LevelPoint {
  /** Milliseconds since 1970. */
  at: number
  level: number
}
export interface PointChange {
  at: number
  value: number
}
export interface LevelEvent extends LevelPoint {
  id: string
  kind: 'count' | 'receipt' | 'other'
  /** Units found, or units put away. */
  units: number
}
export interface LevelChart {
  width: number
  height: number
  plot: { left: number; right: number; top: number; bottom: number }
  steps: string
  area: string
  line: string
  hatches: string[]
  dots: { id: string; x: number; y: number }[]
  risers: { id: string; x: number; y: number; bottom: number; units: number; labelled: boolean }[]
  outs: { x: number; width: number; hours: number }[]
  yTicks: { value: number; y: number }[]
  xTicks: { at: number; x: number; anchor: 'start' | 'middle' | 'end' }[]
  /** Steps of the reorder point that have room for their number. */
  pointLabels: { x: number; y: number; value: number }[]
  last: { x: number; y: number } | null
}

const HOUR = 3_600_000
const KINDS: Partial<Record<Movement['type'], LevelEvent['kind']>> = { count: 'count', receipt: 'receipt' }
const LEVELLESS = new Set<Movement['type']>(['arrival', 'signal', 'flag', 'withdraw'])

/** Movements that moved the level, oldest first; entries taken back and signs without a quantity are left out. */
export function levelEvents(movements: readonly Movement[]): LevelEvent[] {
  return movements
    .filter((m) => !m.voidedBy && !LEVELLESS.has(m.type))
    .map((m) => ({
      id: m.id,
      at: Date.parse(m.effectiveAt),
      level: Math.max(0, m.onHandAfter),
      kind: KINDS[m.type] ?? 'other',
      units: m.quantity,
    }))
    .sort((a, b) => a.at - b.at)
}

/** A round step so that at most `most` of them cover the top. */
export function niceStep(top: number, most: number): number {
  const rough = Math.max(top, 1) / most
  const magnitude = 10 ** Math.floor(Math.log10(rough))
  const step = [1, 2, 5, 10].map((m) => m * magnitude).find((s) => s >= rough) ?? rough
  return Math.max(1, Math.round(step))
}

const r = (value: number): number => Math.round(value * 10) / 10

/** The reorder point at a moment; null before the first one known. */
function pointAt(changes: readonly PointChange[], at: number): number | null {
  let value: number | null = null
  for (const change of changes) if (change.at <= at) value = change.value
  return value
}

interface Scale {
  x: (at: number) => number
  y: (level: number) => number
}

/** Stretches in which level and reorder point both stand still. */
function spans(events: readonly LevelEvent[], changes: readonly PointChange[], from: number, to: number) {
  const cuts = [from, ...events.map((e) => e.at), ...changes.map((c) => c.at), to]
    .filter((at) => at >= from && at <= to)
    .sort((a, b) => a - b)
  const found: { from: number; to: number; level: number; point: number | null }[] = []
  for (let i = 0; i + 1 < cuts.length; i += 1) {
    const [a, b] = [cuts[i] as number, cuts[i + 1] as number]
    if (b <= a) continue
    const before = events.filter((e) => e.at <= a)
    const level = before[before.length - 1]?.level
    if (level !== undefined) found.push({ from: a, to: b, level, point: pointAt(changes, a) })
  }
  return found
}

function stepPath(stretches: readonly { from: number; to: number; level: number }[], scale: Scale): string {
  return stretches
    .map(
      (s, i) =>
        `${i === 0 ? `M${r(scale.x(s.from))} ${r(scale.y(s.level))}` : `V${r(scale.y(s.level))}`}H${r(scale.x(s.to))}`,
    )
    .join('')
}

function pointPath(changes: readonly PointChange[], from: number, to: number, scale: Scale): string {
  const inside = changes.filter((c) => c.at < to)
  return inside
    .map((change, i) => {
      const start = Math.max(change.at, from)
      const end = Math.min(inside[i + 1]?.at ?? to, to)
      if (end <= from) return ''
      return `M${r(scale.x(start))} ${r(scale.y(change.value))}H${r(scale.x(end))}`
    })
    .join('')
}

function outsOf(stretches: ReturnType<typeof spans>, scale: Scale): LevelChart['outs'] {
  const outs: { from: number; to: number }[] = []
  for (const s of stretches.filter((stretch) => stretch.level === 0)) {
    const last = outs[outs.length - 1]
    if (last && last.to === s.from) last.to = s.to
    else outs.push({ from: s.from, to: s.to })
  }
  return outs.map((out) => ({
    x: scale.x(out.from),
    width: Math.max(4, scale.x(out.to) - scale.x(out.from)),
    hours: (out.to - out.from) / HOUR,
  }))
}

function risersOf(events: readonly LevelEvent[], scale: Scale): LevelChart['risers'] {
  let labelEnd = -Infinity
  return events
    .filter((e) => e.kind === 'receipt' && e.units > 0)
    .map((e) => {
      const x = scale.x(e.at)
      const labelled = x - labelEnd > 40
      if (labelled) labelEnd = x
      return {
        id: e.id,
        x,
        y: scale.y(e.level),
        bottom: scale.y(Math.max(0, e.level - e.units)),
        units: e.units,
        labelled,
      }
    })
}

export interface LevelChartInput {
  movements: readonly Movement[]
  /** Reorder points in force, oldest first. */
  points: readonly PointChange[]
  from: number
  to: number
  width: number
  height: number
  /** Room at the right for the words beside the line's end. */
  rightRoom: number
}

/** Works the whole chart out; null when nothing was recorded in the stretch. */
export function levelChart(input: LevelChartInput): LevelChart | null {
  const all = levelEvents(input.movements)
  const events = all.filter((e) => e.at <= input.to)
  const shown = events.filter((e) => e.at >= input.from)
  if (events.length === 0) return null
  const changes = input.points.filter((c) => c.at < input.to)
  const top = Math.max(
    ...events.filter((e) => e.at >= input.from).map((e) => e.level),
    ...changes.map((c) => c.value),
    1,
  )
  const step = niceStep(top * 1.1, 4)
  const max = Math.max(step, Math.ceil((top * 1.08) / step) * step)
  const plot = { left: 34, right: input.width - input.rightRoom, top: 26, bottom: input.height - 28 }
  const scale: Scale = {
    x: (at) => plot.left + ((at - input.from) / (input.to - input.from)) * (plot.right - plot.left),
    y: (level) => plot.bottom - (Math.min(level, max) / max) * (plot.bottom - plot.top),
  }
  const stretches = spans(events, changes, input.from, input.to)
  const steps = stepPath(stretches, scale)
  const first = stretches[0]
  const last = events[events.length - 1] as LevelEvent
  const below = stretches.filter((s) => s.point !== null && s.level < s.point)
  const ticks = input.width > 640 ? 4 : 2
  return {
    width: input.width,
    height: input.height,
    plot,
    steps,
    area: first ? `${steps}V${plot.bottom}H${r(scale.x(first.from))}Z` : '',
    line: pointPath(changes, input.from, input.to, scale),
    hatches: below.map(
      (s) =>
        `M${r(scale.x(s.from))} ${r(scale.y(s.point as number))}H${r(scale.x(s.to))}V${r(scale.y(s.level))}H${r(scale.x(s.from))}Z`,
    ),
    dots: shown.filter((e) => e.kind === 'count').map((e) => ({ id: e.id, x: scale.x(e.at), y: scale.y(e.level) })),
    risers: risersOf(shown, scale),
    outs: outsOf(stretches, scale),
    yTicks: Array.from({ length: Math.round(max / step) + 1 }, (_, i) => ({ value: i * step, y: scale.y(i * step) })),
    xTicks: Array.from({ length: ticks + 1 }, (_, i) => {
      const at = input.from + ((input.to - input.from) * i) / ticks
      return { at, x: scale.x(at), anchor: i === 0 ? 'start' : i === ticks ? 'end' : 'middle' }
    }),
    pointLabels: changes.slice(0, -1).map((c) => ({
      x: scale.x(Math.max(c.at, input.from)) + 8,
      y: scale.y(c.value),
      value: c.value,
    })),
    last: { x: scale.x(input.to), y: scale.y(last.level) },
  }
}
