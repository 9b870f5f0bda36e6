import type { RoundDraft } from '#shared/stored/draft/index.ts'
import type { OutboxEntry } from '#shared/stored/outbox/index.ts'
import type { LocalBin } from '#src/services/overlay.ts'

/** Rules of a counting round, without a screen or a clock. Times in milliseconds. */
const DAY_MS = 86_400_000
/** Digits typed and not saved are kept this long. */
export const DIGITS_KEPT_MS = 8 * 3_600_000
/** A round that was not touched for this long is over; the next one starts anew. */
const ROUND_KEPT_MS = 12 * 3_600_000
/** A longer gap than this between two entries was something else than counting. */
const BREAK_MS = 120_000
/** What one place takes, walking and looking included: an estimate from the keystroke model of a round. */
const SECONDS_A_PLACE = 20

/** Why a place is due, most telling first; null: it is not. */
export type DueReason = 'never-counted' | 'count-first' | 'count-overdue' | 'daily-below'

export function dueReason(bin: LocalBin, now: number): DueReason | null {
  if (bin.kind !== 'counted' || bin.itemId === null || bin.retired) return null
  // Nobody is there; what is below its line is ordered in time for the reopening.
  if (bin.closed) return null
  if (bin.lastCount === null) return 'never-counted'
  if (bin.states.includes('count-first')) return 'count-first'
  if (bin.states.includes('count-overdue')) return 'count-overdue'
  // A place below its line is looked at every day until its order is on the shelf.
  const age = now - Date.parse(bin.lastCount.effectiveAt)
  return bin.states.includes('below') && age >= DAY_MS * 0.75 ? 'daily-below' : null
}

/** Places one walks past, in that order. */
export const walkingOrder = (bins: readonly LocalBin[]): LocalBin[] =>
  bins
    .filter((bin) => !bin.retired && bin.itemId !== null && bin.kind !== 'two-bin')
    .sort((a, b) => a.walkOrder - b.walkOrder || a.display.localeCompare(b.display))

export const dueBins = (bins: readonly LocalBin[], now: number): LocalBin[] =>
  walkingOrder(bins).filter((bin) => dueReason(bin, now) !== null)

/** "12 places, 4 minutes": whole minutes, at least one. */
export const minutesFor = (places: number): number => Math.max(1, Math.round((places * SECONDS_A_PLACE) / 60))

export function newRound(
  userId: string,
  roomId: string,
  walk: readonly LocalBin[],
  scope: 'due' | 'all',
  now: number,
): RoundDraft {
  const ids = walk.map((bin) => bin.id)
  return {
    schema: 1,
    userId,
    roomId,
    walk: ids,
    scope,
    at: ids[0] ?? null,
    done: {},
    skipped: [],
    knownBelow: walk.filter((bin) => bin.states.includes('below')).map((bin) => bin.id),
    digits: {},
    startedAt: now,
    touchedAt: now,
    activeMs: 0,
  }
}

/** Whether a kept round goes on; one that is through or was left hours ago does not. */
export const isAlive = (round: RoundDraft, now: number): boolean =>
  now - round.touchedAt < ROUND_KEPT_MS && round.walk.some((id) => !round.done[id])

/** The next place after one that is not done, going round once; null when all are. */
export function nextPlace(round: RoundDraft, after: string | null): string | null {
  const from = after === null ? -1 : round.walk.indexOf(after)
  const order = [...round.walk.slice(from + 1), ...round.walk.slice(0, from + 1)]
  return (
    order.find((id) => !round.done[id] && !round.skipped.includes(id)) ?? order.find((id) => !round.done[id]) ?? null
  )
}

/** Puts a scanned place into the walk where one stands. */
export function withPlace(round: RoundDraft, binId: string): RoundDraft {
  if (round.walk.includes(binId)) return round
  const at = round.at === null ? round.walk.length : round.walk.indexOf(round.at)
  return { ...round, walk: [...round.walk.slice(0, at), binId, ...round.walk.slice(at)] }
}

/** Marks the time: breaks are left out of the minutes at the end. */
export function touched(round: RoundDraft, now: number): RoundDraft {
  const gap = now - round.touchedAt
  return { ...round, touchedAt: now, activeMs: round.activeMs + (gap > 0 && gap <= BREAK_MS ? gap : 0) }
}

/**
 * A kept round after a restart, brought in line with what the outbox really holds: the outbox is the truth, for a mark
 * may have been lost with the page while the count was already safe. Places that are gone leave the walk.
 */
export function resumed(
  round: RoundDraft,
  entries: readonly OutboxEntry[],
  places: ReadonlySet<string>,
  now: number,
): RoundDraft {
  const walk = round.walk.filter((id) => places.has(id) || round.done[id])
  const takenBack = new Set(entries.filter((e) => e.op.type === 'count.withdraw').map((e) => e.op.targetOpId))
  const done: RoundDraft['done'] = {}
  for (const [id, mark] of Object.entries(round.done)) if (!takenBack.has(mark.opId)) done[id] = mark
  for (const entry of entries) {
    const id = entry.label.binId
    if (entry.op.type !== 'count' || !id || entry.savedAt < round.startedAt || takenBack.has(entry.opId)) continue
    if (!walk.includes(id) || entry.state === 'discarded') continue
    done[id] = {
      opId: entry.opId,
      quantity: Number(entry.op.quantity),
      receiptOpId: done[id]?.receiptOpId ?? null,
      at: entry.savedAt,
    }
  }
  const digits = Object.fromEntries(Object.entries(round.digits).filter(([, typed]) => now - typed.at < DIGITS_KEPT_MS))
  const next: RoundDraft = { ...round, walk, done, digits }
  const stays = next.at !== null && walk.includes(next.at) && !done[next.at]
  return stays ? next : { ...next, at: nextPlace(next, next.at) }
}

const DIGITS = 5

/** The typed text after one more key: no leading zeros, at most five digits (99,999). */
export function withDigit(text: string, digit: string): string {
  const next = text === '0' ? digit : text + digit
  return next.length > DIGITS ? text : next
}

/** The typed text after −1 or +1; an empty field starts from `from`. */
export function stepped(text: string, by: number, from: number): string {
  const value = text === '' ? from : Number(text)
  return String(Math.min(99_999, Math.max(0, value + by)))
}
