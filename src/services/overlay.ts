import type { Bin, BinState } from '#shared/contracts/bins.ts'
import type { SnapshotOpenLine } from '#shared/contracts/counts.ts'
import { binStatesOf, position, under, type BinFacts } from '#shared/ledger/bin-states.ts'
import type { OutboxEntry } from '#shared/stored/outbox/index.ts'
import type { z } from 'zod'
import type { KeptRoom } from './snapshot.ts'

/** A bin as this phone knows it: the record, with what was entered here and is not yet part of that copy. */
export interface LocalBin extends Bin {
  /** Something of it is on this phone and not yet in the record. */
  waiting: boolean
  /** The last count was made here, after the copy of the record. */
  countedHere: boolean
}

const number = (entry: OutboxEntry): number => (typeof entry.op.quantity === 'number' ? entry.op.quantity : 0)
const estimated = (entry: OutboxEntry): string => (typeof entry.op.estTime === 'string' ? entry.op.estTime : '')

/** Whether an entry is not yet part of the copy: unsent, or acknowledged after the copy was fetched. */
const isNews = (entry: OutboxEntry, fetchedAt: number): boolean =>
  entry.state === 'queued' ||
  entry.state === 'sending' ||
  (entry.state === 'acked' && (entry.closedAt ?? 0) >= fetchedAt)

/** Entries that still count: those taken back are left out with the ones that take back. */
function standing(entries: readonly OutboxEntry[]): OutboxEntry[] {
  const gone = new Set<unknown>()
  for (const entry of entries) if (String(entry.op.type).endsWith('.withdraw')) gone.add(entry.op.targetOpId)
  return entries.filter((entry) => !gone.has(entry.opId) && !String(entry.op.type).endsWith('.withdraw'))
}

const effects: Record<string, 1 | -1> = { receipt: 1, release: 1, take: -1, wastage: -1, hold: -1 }

function applyOne(bin: LocalBin, entry: OutboxEntry): LocalBin {
  const { type } = entry.op
  const unsent = entry.state !== 'acked'
  if (type === 'count' || type === 'count.correct') {
    return {
      ...bin,
      onHand: number(entry),
      lastCount: { quantity: number(entry), effectiveAt: estimated(entry) },
      waiting: bin.waiting || unsent,
      countedHere: true,
      recordsDisagree: false,
    }
  }
  const sign = type === 'transfer' ? (entry.op.direction === 'in' ? 1 : -1) : effects[String(type)]
  if (!sign) return bin
  const onOrder = entry.op.orderLineId ? Math.max(0, bin.onOrder - number(entry)) : bin.onOrder
  return { ...bin, onHand: Math.max(0, bin.onHand + sign * number(entry)), onOrder, waiting: bin.waiting || unsent }
}

/**
 * The planned closure that is on at a moment, also when the copy is older than its end. What the record flags in a
 * closed place serves the reopening, so such a place is not quiet any more.
 */
function closureAt(bin: Bin, now: number): { closed: Bin['closed']; isQuiet: boolean } {
  const { closed } = bin
  const isOn =
    closed !== null && Date.parse(closed.from) <= now && (closed.until === null || now < Date.parse(closed.until))
  return { closed: isOn ? closed : null, isQuiet: isOn && !bin.states.some((state) => flags.has(state)) }
}
const flags: ReadonlySet<BinState> = new Set(['below', 'count-first', 'count-overdue'])

/** Position and states anew: counts grow old and expected use goes on, also without a network. */
function stateAt(bin: LocalBin, meanPerDay: number | null, now: number): LocalBin {
  const { lastCount, reorderPoint, onHand, onOrder } = bin
  const { closed, isQuiet } = closureAt(bin, now)
  const facts: BinFacts = {
    kind: bin.kind,
    isOverflow: bin.overflowOf !== null,
    hasItem: bin.itemId !== null,
    onHand,
    held: bin.held,
    onOrder,
    hasLateOrder: bin.states.includes('late-order'),
    lastCount: lastCount && { quantity: lastCount.quantity, effectiveAt: Date.parse(lastCount.effectiveAt) },
    reorderPoint,
    meanPerDay,
    countEveryDays: bin.countEveryDays,
    isQuiet,
  }
  return { ...bin, closed, position: position(facts), under: under(facts), states: binStatesOf(facts, now) }
}

/**
 * Lays what was entered on this phone over a copy of the record: counts set the level, movements after them change it.
 * Pure; the server folds anew when the entries arrive, and its word replaces this.
 */
export function overlayBins(room: KeptRoom, entries: readonly OutboxEntry[], now: number): LocalBin[] {
  const means = new Map(room.policies.map((policy) => [policy.binId, policy.meanPerDay]))
  const ours = entries.filter((entry) => entry.label.roomId === room.roomId)
  const news = standing(ours).filter((entry) => isNews(entry, room.fetchedAt))
  const byBin = new Map<string, OutboxEntry[]>()
  for (const entry of news) {
    const id = entry.label.binId
    if (id) byBin.set(id, [...(byBin.get(id) ?? []), entry])
  }
  return room.bins.map((bin) => {
    const start: LocalBin = { ...bin, waiting: false, countedHere: false }
    const mine = (byBin.get(bin.id) ?? []).sort(
      (a, b) => estimated(a).localeCompare(estimated(b)) || a.localSeq - b.localSeq,
    )
    const folded = mine.reduce(applyOne, start)
    return stateAt(folded, means.get(bin.id) ?? null, now)
  })
}

type OpenLine = z.infer<typeof SnapshotOpenLine>

/** What is still open of the order lines of a bin, less what was put away on this phone since. */
export function overlayLines(room: KeptRoom, entries: readonly OutboxEntry[], binId: string): OpenLine[] {
  const news = standing(entries).filter((entry) => entry.op.type === 'receipt' && isNews(entry, room.fetchedAt))
  return room.openLines
    .filter((line) => line.binId === binId)
    .map((line) => {
      const here = news
        .filter((entry) => entry.op.orderLineId === line.orderLineId)
        .reduce((sum, e) => sum + number(e), 0)
      return { ...line, units: Math.max(0, line.units - here) }
    })
    .filter((line) => line.units > 0)
}
