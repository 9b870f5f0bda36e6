import type { DemandEvent, DemandInterval, IntervalReason } from './demand-events.ts'

const dayMs = 86_400_000
/** Counts closer than this are one count: a recount 20 minutes later must not look like a burst of use. */
const shortestMs = dayMs / 2
const historyDays = 730

interface Options {
  /** Units of one pack: a rise above the record by more than this is unexplained. */
  packSize: number
}

/**
 * Cuts the ledger of one bin under one assignment into intervals of use.
 *
 * use = opening + put away + transfers in − transfers out − wastage − put on hold + released ± adjust − closing.
 * Takes are use: they stay inside and are never subtracted. Counts within 12 hours are one count (the later closes and
 * opens). Negative use is kept; an interval that says nothing is listed with its reason and not used.
 * Source: the consumption identity of the public-health store handbooks, with stock-outs as censoring (Conrad 1976).
 *
 * @param events standing rows in effective order
 * @returns oldest first
 */
export function demandIntervals(events: readonly DemandEvent[], options: Options): DemandInterval[] {
  const bounds = boundaries(events)
  const newest = bounds.length ? events[bounds.at(-1)!]!.effectiveAt : 0
  return bounds.slice(1).map((closing, i) => intervalBetween(events, bounds[i]!, closing, options, newest))
}

/** Indexes of the counts that open and close intervals; neighbours are at least half a day apart. */
function boundaries(events: readonly DemandEvent[]): number[] {
  const chosen: number[] = []
  let first = -Infinity
  events.forEach((event, i) => {
    if (event.type !== 'count') return
    const last = chosen.length ? events[chosen.at(-1)!]!.effectiveAt : -Infinity
    if (event.effectiveAt - first < shortestMs) chosen[chosen.length - 1] = i
    else if (event.effectiveAt - last >= shortestMs) {
      chosen.push(i)
      first = event.effectiveAt
    }
    // Else it lies within 12 hours of a count that already closed one: the interval runs on over it.
  })
  return farEnough(events, chosen)
}

/** A later count may have moved a boundary close to the one before: then the two are one. */
function farEnough(events: readonly DemandEvent[], chosen: number[]): number[] {
  return chosen.filter((at, i) => {
    const next = chosen[i + 1]
    return next === undefined || events[next]!.effectiveAt - events[at]!.effectiveAt >= shortestMs
  })
}

function intervalBetween(
  events: readonly DemandEvent[],
  opening: number,
  closing: number,
  options: Options,
  newest: number,
): DemandInterval {
  const open = events[opening]!
  const close = events[closing]!
  const between = events.slice(opening + 1, closing)
  const sum = (...types: string[]): number => between.reduce((s, e) => (types.includes(e.type) ? s + e.quantity : s), 0)
  const moved = sum('receipt', 'transfer-in', 'transfer-out', 'wastage', 'hold', 'release', 'adjust')
  const quantity = open.quantity + moved - close.quantity
  const days = (close.effectiveAt - open.effectiveAt) / dayMs
  const stockedFrom = open.quantity > 0 ? open.effectiveAt : firstPutAway(between)
  const exposureDays = stockedFrom === null ? 0 : (close.effectiveAt - stockedFrom) / dayMs
  // A negative sum of holds and releases means more was put aside than given back.
  const heldAway = sum('hold', 'release') < 0
  const rise = close.quantity - (open.quantity + moved + sum('take'))
  const why = reasonOf(exposureDays, rise > options.packSize, (newest - close.effectiveAt) / dayMs > historyDays)
  return {
    openingOpId: open.opId,
    closingOpId: close.opId,
    openedAt: open.effectiveAt,
    closedAt: close.effectiveAt,
    days,
    exposureDays: exposureDays < shortestMs / dayMs ? days : exposureDays,
    quantity,
    censored: close.quantity === 0 && !heldAway,
    weight: 1,
    used: why === null,
    why,
    wastage: -sum('wastage'),
  }
}

function reasonOf(exposureDays: number, unexplained: boolean, old: boolean): IntervalReason | null {
  if (unexplained) return 'rise-unexplained'
  if (exposureDays < shortestMs / dayMs) return 'was-empty'
  return old ? 'too-old' : null
}

function firstPutAway(events: readonly DemandEvent[]): number | null {
  const first = events.find(
    (e) => (e.type === 'receipt' || e.type === 'transfer-in' || e.type === 'release') && e.quantity > 0,
  )
  return first?.effectiveAt ?? null
}
