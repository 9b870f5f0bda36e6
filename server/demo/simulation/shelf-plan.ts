import { atHour, type Day } from './days.ts'
import { demandTimes } from './demand-times.ts'
import type { Script } from './ending.ts'
import { keyed } from './keyed.ts'
import type { Round } from './rounds.ts'
import type { BinState, SimWindow } from './sim-types.ts'
import { coordinatorOf, putAways, slotOfOrder, workingDaysLater, type Slot } from './supply.ts'
import type { PlannedTransfer } from './transfers.ts'

/** What is going to happen to one place; times epoch ms. */
export type ShelfEvent =
  | { at: number; kind: 'use' }
  | { at: number; kind: 'round'; round: Round }
  | { at: number; kind: 'slot'; slot: Slot }
  | { at: number; kind: 'put-away'; line: string; units: number; slot: Slot; isKeyed: boolean }
  | { at: number; kind: 'waste' }
  | { at: number; kind: 'transfer'; transfer: PlannedTransfer }
  | { at: number; kind: 'shelf'; units: number }
  | { at: number; kind: 'hold'; units: number; reason: string }

export interface RunInput {
  state: BinState
  days: readonly Day[]
  /** Of the place's room. */
  rounds: readonly Round[]
  /** Order days of the item's supplier. */
  slots: readonly Slot[]
  /** Those that touch the place. */
  transfers: readonly PlannedTransfer[]
  window: SimWindow
  /** When the order of a slot was cancelled; null: it was not. */
  cancelledAt(slot: Slot): number | null
}

const secondsAPlace = 24
const skippedPlaces = 0.06
const wasteADay = 0.004
const hourMs = 3_600_000

/** Everything that is known beforehand, oldest first; deliveries of orders still to be placed come later. */
export function eventsOf(input: RunInput, script: Script): ShelfEvent[] {
  const lives = script.frozen ? [] : [...useAndWaste(input, script), ...planned(input, script), ...onTheirWay(input)]
  return [...lives, ...walks(input, script)].sort((a, b) => a.at - b.at)
}

function useAndWaste({ state, days, window }: RunInput, script: Script): ShelfEvent[] {
  const since = state.lastCountAt ?? window.began
  return days.flatMap((day) => {
    const used = demandTimes(state.plan, day, window.began)
      .filter((at) => at > since && at <= script.noDemandAfter)
      .map((at): ShelfEvent => ({ at, kind: 'use' }))
    const random = keyed('waste', state.plan.code, day.ordinal)
    const wastedAt = random() < wasteADay ? atHour(day, 9 + random() * 9) : Infinity
    return wastedAt <= script.noDemandAfter && wastedAt < Infinity ? [...used, { at: wastedAt, kind: 'waste' }] : used
  })
}

function walks({ state, rounds }: RunInput, script: Script): ShelfEvent[] {
  const { plan } = state
  const pace = (plan.walkOrder / 10) * secondsAPlace * 1000
  return rounds.flatMap((round): ShelfEvent[] => {
    const random = keyed('walk', plan.code, round.id)
    const at = round.at + pace + Math.round(random() * 12_000)
    const isSkipped = !round.isWhole && script.shelf === null && random() < skippedPlaces
    return isSkipped || at > script.noCountAfter ? [] : [{ at, kind: 'round', round }]
  })
}

function planned({ state, slots, transfers }: RunInput, script: Script): ShelfEvent[] {
  const moved = transfers.map((transfer): ShelfEvent => ({ at: transfer.at, kind: 'transfer', transfer }))
  // An overflow place is ordered for through its main place.
  if (state.plan.overflowOf !== null) return moved
  const ordered = slots.filter((s) => s.decidedAt <= script.noOrderAfter)
  return [
    ...moved,
    ...[...ordered, ...(script.forced ? [script.forced.slot] : [])].map((slot): ShelfEvent => ({
      at: slot.decidedAt,
      kind: 'slot',
      slot,
    })),
    ...(script.shelf ? [{ ...script.shelf, kind: 'shelf' } as const] : []),
    ...(script.hold ? [{ ...script.hold, kind: 'hold' } as const] : []),
  ]
}

/** Deliveries of orders from before this window: as they were going to come, else the next working morning. */
function onTheirWay(input: RunInput): ShelfEvent[] {
  const { plan, startAt, open } = input.state
  return open.map((line) => {
    const slot = slotOfOrder(plan.item.supplier, coordinatorOf(plan.room), line.sentAt)
    const packs = Math.max(1, Math.round(line.units / plan.item.unitsPerOrder))
    const coming = putAways(slot, plan.code, packs).find((p) => p.at > startAt)?.at
    const at = putAwayBy(input, slot, coming ?? workingDaysLater(startAt, 1))
    return { at, kind: 'put-away', line: line.line, units: line.units, slot, isKeyed: true }
  })
}

/** Where the world stops, what should have come on an earlier day has come. */
export function putAwayBy({ state, window }: RunInput, slot: Slot, at: number): number {
  const isDue = window.last && slot.expectedOn < window.today
  if (!isDue || at <= window.to) return at
  return Math.max(state.startAt + 1, Math.min(slot.expectedAt + 4 * hourMs, window.to))
}
