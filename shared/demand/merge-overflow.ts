import { movesStock } from '#shared/ledger/movement.ts'
import type { DemandEvent } from './demand-events.ts'

/** Counts of two places of one item this close together are one count of both. */
const togetherMs = 12 * 3_600_000

/**
 * The events of a main place and its overflow places as those of one place.
 *
 * A count of the main place stands for all when every overflow place was counted within 12 hours of it; it then counts
 * at the later of the moments, with what the records say lay in all of them. Other counts of the main place tell
 * nothing of the whole and are left out. Movements of all places stay; a move between them cancels itself.
 *
 * @param places each in effective order, the main place first, as `demandIntervals` takes them
 * @returns in effective order
 */
export function mergeOverflow(places: readonly (readonly DemandEvent[])[]): DemandEvent[] {
  const [main = [], ...others] = places
  if (others.length === 0) return [...main]
  const counts = main.filter((e) => e.type === 'count').flatMap((count) => wholeCount(count, places) ?? [])
  const moves = places.flat().filter((e) => e.type !== 'count')
  // On one moment a count comes last: it includes what moved.
  const rank = (e: DemandEvent): number => (e.type === 'count' ? 1 : 0)
  return [...moves, ...latestPerMoment(counts)].sort((a, b) => a.effectiveAt - b.effectiveAt || rank(a) - rank(b))
}

function wholeCount(count: DemandEvent, places: readonly (readonly DemandEvent[])[]): DemandEvent | null {
  const [, ...others] = places
  const partners = others.map((events) => closestCount(events, count.effectiveAt))
  if (partners.some((p) => p === null)) return null
  const effectiveAt = Math.max(count.effectiveAt, ...partners.map((p) => p!.effectiveAt))
  return {
    ...count,
    effectiveAt,
    quantity: Math.max(
      0,
      places.reduce((sum, events) => sum + levelAt(events, effectiveAt), 0),
    ),
  }
}

function closestCount(events: readonly DemandEvent[], at: number): DemandEvent | null {
  const near = events.filter((e) => e.type === 'count' && Math.abs(e.effectiveAt - at) <= togetherMs)
  return near.reduce<DemandEvent | null>(
    (best, e) => (!best || Math.abs(e.effectiveAt - at) < Math.abs(best.effectiveAt - at) ? e : best),
    null,
  )
}

/** Units by the record of one place after everything up to a moment. */
function levelAt(events: readonly DemandEvent[], at: number): number {
  return events.reduce((level, e) => {
    if (e.effectiveAt > at) return level
    if (e.type === 'count') return e.quantity
    return movesStock(e.type) ? level + e.quantity : level
  }, 0)
}

/** Two counts of the main place may share one partner: the later one is kept. */
const latestPerMoment = (counts: readonly DemandEvent[]): DemandEvent[] => [
  ...new Map(counts.map((c) => [c.effectiveAt, c])).values(),
]
