import { workingDaysLater, type Slot } from './supply.ts'
import { dayMs } from './days.ts'
import { keyed } from './keyed.ts'
import type { WantedLine } from './shelf.ts'
import type { SimOrder, SimWindow } from './sim-types.ts'

/** Every so many order days of an outside supplier one order is cancelled, one was placed in another system. */
const every = { cancelled: 17, elsewhere: 19 }
/** Newer orders are left as they are. */
const settledDays = 25
const minuteMs = 60_000

const isOld = (slot: Slot, window: SimWindow): boolean =>
  slot.supplier !== 'CS' && slot.cutOff < window.to - settledDays * dayMs

/** When the order of a slot was cancelled before anything came; null: it was not. */
export function cancelledAt(slot: Slot, window: SimWindow): number | null {
  const isCancelled = isOld(slot, window) && slot.ordinal % every.cancelled === 5 && slot.coordinator === '3012'
  return isCancelled ? workingDaysLater(slot.sentAt, 1) : null
}

const isElsewhere = (slot: Slot, window: SimWindow): boolean =>
  isOld(slot, window) && slot.ordinal % every.elsewhere === 8 && slot.coordinator === '3011'

/** Lines of one coordinator's list and one supplier become one order; a line of a story is an order of its own. */
export function ordersOf(wanted: readonly { bin: string; packSize: number; line: WantedLine }[], window: SimWindow) {
  const orders = new Map<string, SimOrder>()
  for (const { bin, packSize, line } of wanted) {
    const key = `${line.slot.supplier}/${line.slot.coordinator}/${line.slot.cutOff}/${line.story?.name ?? ''}`
    const order = orders.get(key) ?? orderOf(key, line, window)
    orders.set(key, order)
    const units = line.packs * packSize
    const isCancelled = line.cancelledAt !== null && line.cancelledAt <= window.to
    order.lines.push({ key: line.line, bin, packs: line.packs, units, cancelledUnits: isCancelled ? units : 0 })
    if (isCancelled && line.wasUnkeyed) {
      order.cancelledAt = line.cancelledAt
      order.cancelReason = 'Not found on the ward; the supplier says it was delivered.'
    }
  }
  const made = [...orders.values()]
  // Nothing is left of an order whose only line was never keyed.
  for (const order of made)
    if (order.cancelledAt !== null && order.lines.every((l) => l.cancelledUnits === l.units)) order.state = 'cancelled'
  return made.sort((a, b) => a.sentAt - b.sentAt || (a.key < b.key ? -1 : 1))
}

function orderOf(key: string, line: WantedLine, window: SimWindow): SimOrder {
  const { slot, story } = line
  const random = keyed('order', key)
  const answered = workingDaysLater(slot.sentAt, 1) - Math.round(random() * 150 * minuteMs)
  const acknowledges = story ? story.isAcknowledged : slot.supplier !== 'CS' && random() < 0.85
  const acknowledgedAt = story?.isAcknowledged ? Math.min(answered, window.to) : answered
  const isAcknowledged = acknowledges && acknowledgedAt <= window.to
  const cancelled = story ? null : line.wasUnkeyed ? null : line.cancelledAt
  const elsewhere = !story && isElsewhere(slot, window)
  return {
    key,
    supplier: slot.supplier,
    state: elsewhere
      ? 'recorded-elsewhere'
      : cancelled !== null
        ? 'cancelled'
        : isAcknowledged
          ? 'acknowledged'
          : 'sent',
    coordinator: slot.coordinator,
    outsideReference: elsewhere ? `PO-${String(4000 + (slot.ordinal % 1000))}` : null,
    createdAt: slot.decidedAt,
    sentAt: slot.sentAt,
    expectedOn: slot.expectedOn,
    acknowledgedAt: isAcknowledged && cancelled === null ? acknowledgedAt : null,
    cancelledAt: cancelled,
    cancelReason: cancelled === null ? null : 'The supplier has none; ordered again on the next list.',
    lines: [],
  }
}
