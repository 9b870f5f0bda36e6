import { uuidv7 } from 'uuidv7'
import type { CountQuestion, CountSituation, OpenLine } from '#shared/counts/unusual-count.ts'
import type { OutboxLabel } from '#shared/stored/outbox/index.ts'
import type { LocalBin } from '#src/services/overlay.ts'
import type { NewEntry } from '#src/services/outbox.ts'
import type { KeptRoom } from '#src/services/snapshot.ts'

/** Turns what a person did at a place into entries, and a place into what the question rule needs. */
const DAY_MS = 86_400_000

export type Fresh = Omit<NewEntry, 'userId' | 'initials'>

/** A place whose code this phone does not know: it can be counted all the same, the server sorts it out. */
export interface UnknownPlace {
  roomId: string
  code: string
  display: string
}
export type CountPlace = { known: LocalBin } | { unknown: UnknownPlace }

export function labelOf(place: CountPlace): OutboxLabel {
  if ('unknown' in place) {
    const { roomId, display } = place.unknown
    return { roomId, binId: null, binDisplay: display, itemName: '', unit: '' }
  }
  const bin = place.known
  return {
    roomId: bin.roomId,
    binId: bin.id,
    binDisplay: bin.display,
    itemName: bin.item?.name ?? '',
    unit: bin.item?.unitOfUse ?? '',
  }
}

const where = (place: CountPlace): { binId?: string; binCode?: string; itemId?: string } =>
  'unknown' in place
    ? { binCode: place.unknown.code }
    : { binId: place.known.id, ...(place.known.itemId ? { itemId: place.known.itemId } : {}) }

/** What the person saw when deciding, kept with the entry: for the ledger's reader and for tuning the questions. */
export interface Basis {
  roomVersion: number | null
  lastShown: number | null
  question: CountQuestion['kind'] | null
  answer: string | null
}

/** A count, and before it the deliveries put away that a person named in answer to a question. */
export function countEntries(
  place: CountPlace,
  quantity: number,
  putAway: readonly { line: OpenLine; quantity: number }[],
  basis: Basis,
): Fresh[] {
  const label = labelOf(place)
  const shown = Object.fromEntries(Object.entries(basis).filter(([, value]) => value !== null)) as Record<
    string,
    string | number
  >
  const receipts = putAway.map(({ line, quantity: units }): Fresh => ({
    label,
    op: { opId: uuidv7(), type: 'receipt', quantity: units, orderLineId: line.orderLineId, ...where(place) },
  }))
  return [...receipts, { label, op: { opId: uuidv7(), type: 'count', quantity, basis: shown, ...where(place) } }]
}

/** Entries that take back a count and the put-away saved with it. They are new entries: nothing is ever deleted. */
export function takeBackEntries(place: CountPlace, opId: string, receiptOpIds: readonly string[]): Fresh[] {
  const label = labelOf(place)
  return [
    { label, op: { opId: uuidv7(), type: 'count.withdraw', targetOpId: opId, ...where(place) } },
    ...receiptOpIds.map((target): Fresh => ({
      label,
      op: { opId: uuidv7(), type: 'movement.withdraw', targetOpId: target, ...where(place) },
    })),
  ]
}

/** Spreads a rise over the open order lines, oldest first, whole lines as far as they go. */
export function spreadRise(rise: number, lines: readonly OpenLine[]): { line: OpenLine; quantity: number }[] {
  let left = rise
  return lines.flatMap((line) => {
    const quantity = Math.min(line.units, Math.max(0, left))
    left -= quantity
    return quantity > 0 ? [{ line, quantity }] : []
  })
}

/** What the question rule needs to know of a place. */
export function situationOf(
  bin: LocalBin,
  room: KeptRoom,
  openLines: readonly OpenLine[],
  quantity: number,
  now: number,
): CountSituation {
  const policy = room.policies.find((row) => row.binId === bin.id)
  // An overflow place is counted on its own; its units stand in the main place's level all the same.
  const elsewhere = room.bins.filter((one) => one.overflowOf === bin.id).reduce((sum, one) => sum + one.onHand, 0)
  const last = bin.lastCount
  return {
    quantity,
    last: last && { quantity: last.quantity, daysAgo: Math.max(0, now - Date.parse(last.effectiveAt)) / DAY_MS },
    recordedSince: last && !bin.recordsDisagree ? bin.onHand - elsewhere - last.quantity : 0,
    meanPerDay: policy?.meanPerDay ?? null,
    variancePerDay: policy?.variancePerDay ?? null,
    capacity: bin.capacity,
    packSize: bin.packSize,
    openLines,
  }
}
