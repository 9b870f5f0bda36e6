import type { BinPlan } from '../bin-plan.ts'
import { hospital, rooms, suppliers } from '../catalogue/places.ts'
import { daysBetween, localDate, type Day } from './days.ts'
import { cancelledAt, ordersOf } from './orders.ts'
import { roundsOf } from './rounds.ts'
import { liveShelf, type WantedLine } from './shelf.ts'
import type { BinState, SimOp, Simulated, SimWindow } from './sim-types.ts'
import { coordinatorOf, slotsOf, type Slot } from './supply.ts'
import { plannedTransfers, type PlannedTransfer } from './transfers.ts'

/** How a place is before its first count. */
export const untouched = (plan: BinPlan, began: number): BinState => ({
  plan,
  startAt: began,
  record: null,
  lastCountAt: null,
  held: 0,
  open: [],
  reorderPoint: plan.reorderPoint,
  parLevel: plan.parLevel,
})

/**
 * Lets the hospital live through a window: every place is used, counted, ordered for and filled up again.
 * Pure: the same states and the same window give the same entries, and what a day brings does not depend on where
 * windows were cut.
 */
export function simulate(states: readonly BinState[], window: SimWindow): Simulated {
  const earliest = Math.min(window.from, ...states.map((s) => s.lastCountAt ?? window.from))
  const days = daysBetween(earliest, window.to, window.zone)
  const rounds = new Map(rooms.map((room) => [room.code, roundsOf(room, days, window)]))
  const slots = slotsBySupplier(days)
  const transfers = byBin(
    plannedTransfers(
      states.map((s) => s.plan),
      days,
      window.began,
    ).filter(isNew(states, window)),
  )
  const ops = new Map<string, SimOp[]>()
  const wanted: { bin: string; packSize: number; line: WantedLine }[] = []
  for (const state of states) {
    const { plan } = state
    const life = liveShelf({
      state,
      days,
      rounds: rounds.get(plan.room.code) ?? [],
      slots: slots.get(`${plan.item.supplier}/${coordinatorOf(plan.room)}`) ?? [],
      transfers: transfers.get(plan.code) ?? [],
      window,
      cancelledAt: (slot) => cancelledAt(slot, window),
    })
    ops.set(
      plan.code,
      life.ops.sort((a, b) => a.at - b.at),
    )
    for (const line of life.lines) wanted.push({ bin: plan.code, packSize: plan.item.unitsPerOrder, line })
  }
  return { orders: ordersOf(wanted, window), ops }
}

function slotsBySupplier(days: readonly Day[]): Map<string, Slot[]> {
  const coordinators = [...new Set(rooms.map(coordinatorOf))]
  return new Map(
    suppliers.flatMap((s) => coordinators.map((c) => [`${s.code}/${c}`, slotsOf(s.code, c, days)] as const)),
  )
}

/** A move needs both its places to live in the window at that moment. */
function isNew(states: readonly BinState[], window: SimWindow): (transfer: PlannedTransfer) => boolean {
  const starts = new Map(states.map((s) => [s.plan.code, s.startAt]))
  return ({ at, fromBin, toBin }) =>
    at <= window.to && [fromBin, toBin].every((bin) => at > (starts.get(bin) ?? Infinity))
}

function byBin(transfers: readonly PlannedTransfer[]): Map<string, PlannedTransfer[]> {
  const groups = new Map<string, PlannedTransfer[]>()
  for (const transfer of transfers)
    for (const bin of [transfer.fromBin, transfer.toBin]) groups.set(bin, [...(groups.get(bin) ?? []), transfer])
  return groups
}

export const demoZone = hospital.timeZone

/** A window of the demo hospital's life. */
export const windowOf = (
  span: Pick<SimWindow, 'from' | 'to' | 'began'>,
  end: Pick<SimWindow, 'last' | 'withStories'>,
): SimWindow => ({ ...span, ...end, zone: demoZone, today: localDate(span.to, demoZone) })
