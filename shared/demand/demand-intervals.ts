import type { Exposure } from './activity.ts'
import type { DemandEvent, DemandInterval, IntervalReason } from './demand-events.ts'
import { withExtraUnits } from './extra-units.ts'

const dayMs = 86_400_000
/** Counts closer than this are one count: a recount 20 minutes later must not look like a burst of use. */
const shortestMs = dayMs / 2
const shortestDays = shortestMs / dayMs
const historyDays = 730
/** A stretch in which less than this share of its time counts was spent behind a closed door. */
const closedShare = 0.25

/** A stretch of time a person leaves out, with a reason on record. Epoch ms. */
export interface Exclusion {
  id: string
  from: number
  to: number
}

/** What decides how a ledger is cut. */
export interface IntervalOptions {
  /** Units of one pack: a rise above the record by more than this is unexplained. */
  packSize: number
  /** How busy the place was; every day alike without it. */
  exposure?: Exposure
  /** Epoch ms; counts before it open nothing that is used. */
  historyStart?: number | null
  exclusions?: readonly Exclusion[]
}

/**
 * Cuts the ledger of one bin under one assignment into intervals of use.
 *
 * use = opening + put away + transfers in − transfers out − wastage − put on hold + released ± adjust − closing.
 * Takes are use: they stay inside and are never subtracted. Counts within 12 hours are one count (the later closes and
 * opens). Negative use is kept; an interval that says nothing is listed with its reason and not used.
 * An exclusion is a stretch of time, so a late count that cuts anew cannot lose it: it leaves out the intervals it
 * covers by more than 12 hours or more than half, and, being longer than 12 hours itself, those that hold half of it.
 * Exposure counts usual days with something to take; units announced by a planned change are turned into such days
 * (`withExtraUnits`).
 * Source: the consumption identity of the public-health store handbooks, with stock-outs as censoring (Conrad 1976).
 *
 * @param events standing rows in effective order
 * @returns oldest first
 */
export const demandIntervals = (events: readonly DemandEvent[], options: IntervalOptions): DemandInterval[] =>
  withExtraUnits(cutIntervals(events, options)).intervals

/** The same before units announced by planned changes are turned into days. */
export function cutIntervals(events: readonly DemandEvent[], options: IntervalOptions): DemandInterval[] {
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
  options: IntervalOptions,
  newest: number,
): DemandInterval {
  const open = events[opening]!
  const close = events[closing]!
  const between = events.slice(opening + 1, closing)
  const sum = (...types: string[]): number => between.reduce((s, e) => (types.includes(e.type) ? s + e.quantity : s), 0)
  const moved = sum('receipt', 'transfer-in', 'transfer-out', 'wastage', 'hold', 'release', 'adjust')
  const span = { from: open.effectiveAt, to: close.effectiveAt }
  const days = (span.to - span.from) / dayMs
  const stockedFrom = open.quantity > 0 ? span.from : firstPutAway(between)
  const stockedDays = stockedFrom === null ? 0 : (span.to - stockedFrom) / dayMs
  const busy = options.exposure?.between(stockedFrom ?? span.to, span.to) ?? { days: stockedDays, extraUnits: 0 }
  const wasEmpty = stockedDays < shortestDays
  const wasClosed = busy.days < shortestDays && busy.days < closedShare * stockedDays
  // A negative sum of holds and releases means more was put aside than given back.
  const heldAway = sum('hold', 'release') < 0
  const rise = close.quantity - (open.quantity + moved + sum('take'))
  const why = firstReason({
    'before-start': span.from < (options.historyStart ?? -Infinity),
    excluded: (options.exclusions ?? []).some((exclusion) => covers(exclusion, span)),
    'rise-unexplained': rise > options.packSize,
    'was-empty': wasEmpty,
    closed: wasClosed,
    'too-old': (newest - span.to) / dayMs > historyDays,
  })
  return {
    openingOpId: open.opId,
    closingOpId: close.opId,
    openedAt: span.from,
    closedAt: span.to,
    days,
    stockedFrom,
    exposureDays: wasEmpty || wasClosed ? days : busy.days,
    quantity: open.quantity + moved - close.quantity,
    extraUnits: wasEmpty || wasClosed ? 0 : busy.extraUnits,
    censored: close.quantity === 0 && !heldAway,
    weight: 1,
    used: why === null,
    why,
    wastage: -sum('wastage'),
  }
}

/** The first reason that holds, in the order given: what a person decided comes before what the records show. */
const firstReason = (reasons: Record<Exclude<IntervalReason, 'merged'>, boolean>): IntervalReason | null =>
  (Object.keys(reasons) as (keyof typeof reasons)[]).find((reason) => reasons[reason]) ?? null

function covers(exclusion: Exclusion, span: { from: number; to: number }): boolean {
  const overlap = Math.min(exclusion.to, span.to) - Math.max(exclusion.from, span.from)
  const length = exclusion.to - exclusion.from
  return overlap > shortestMs || overlap > (span.to - span.from) / 2 || (length > shortestMs && overlap >= length / 2)
}

function firstPutAway(events: readonly DemandEvent[]): number | null {
  const first = events.find(
    (e) => (e.type === 'receipt' || e.type === 'transfer-in' || e.type === 'release') && e.quantity > 0,
  )
  return first?.effectiveAt ?? null
}
