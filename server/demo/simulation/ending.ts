import { believedWorkingDays, workingDaysBetween } from '#shared/replenishment/believed.ts'
import type { BinPlan } from '../bin-plan.ts'
import { story, type StoryPlace } from '../story.ts'
import { dayMs, type Day } from './days.ts'
import type { Round } from './rounds.ts'
import type { BinState, SimWindow } from './sim-types.ts'
import { coordinatorOf, isWorkingDay, slotsOf, type Slot } from './supply.ts'

/** An order placed because the story wants it, whatever the shelf says; it is an order of its own. */
export interface ForcedOrder {
  slot: Slot
  name: string
  isAcknowledged: boolean
  /** When it is put away; null: not before the window ends. */
  putAwayAt: number | null
}

/** How one place departs from ordinary life so that the world stands as told when the window ends. */
export interface Script {
  /** Nobody ever counts here. */
  neverCounted: boolean
  /** Nothing happens but counts. */
  frozen: boolean
  noCountAfter: number
  noOrderAfter: number
  noDemandAfter: number
  forced: ForcedOrder | null
  /** The shelf holds this much from that moment on. */
  shelf: { at: number; units: number } | null
  hold: { at: number; units: number; reason: string } | null
  /** Put away in this span, on the shelf and not keyed. */
  unkeyed: { from: number; to: number } | null
}

const ordinary: Script = {
  neverCounted: false,
  frozen: false,
  noCountAfter: Infinity,
  noOrderAfter: Infinity,
  noDemandAfter: Infinity,
  forced: null,
  shelf: null,
  hold: null,
  unkeyed: null,
}

const hourMs = dayMs / 24
/** More than the working days an order is believed for. */
const hopelesslyLate = 4

const is = (place: StoryPlace, plan: BinPlan): boolean =>
  plan.overflowOf === null && plan.room.code === place.room && plan.item.code === place.item
const isOneOf = (places: readonly StoryPlace[], plan: BinPlan): boolean => places.some((place) => is(place, plan))

/** The last order day that fits, whether or not the coordinator got round to it. */
function lastSlot(plan: BinPlan, days: readonly Day[], fits: (slot: Slot) => boolean): Slot | null {
  return slotsOf(plan.item.supplier, coordinatorOf(plan.room), days, true).filter(fits).at(-1) ?? null
}

/** The script of one place; most have none. `rounds` are those of its room. */
export function scriptOf(state: BinState, days: readonly Day[], rounds: readonly Round[], window: SimWindow): Script {
  const { plan } = state
  if (isOneOf(story.neverCounted, plan)) return { ...ordinary, neverCounted: true, frozen: true }
  if (!window.last) return ordinary
  if (isOneOf(story.oldCounts, plan))
    return { ...ordinary, noCountAfter: window.to - (plan.room.countEveryDays * dayMs + 9 * hourMs) }
  if (!window.withStories) {
    const isStill = is(story.emptyVital, plan) || is(story.nextDoor, plan)
    return { ...ordinary, frozen: isStill && state.startAt === window.from }
  }
  return { ...ordinary, ...ending(state, days, rounds, window) }
}

function ending(state: BinState, days: readonly Day[], rounds: readonly Round[], window: SimWindow): Partial<Script> {
  const { plan } = state
  const { to } = window
  if (is(story.emptyVital, plan)) return emptyVital(plan, days, window)
  if (is(story.nextDoor, plan)) {
    const lastWalk = (rounds.at(-1)?.at ?? to) - 60_000
    return {
      noOrderAfter: to - 10 * dayMs,
      noDemandAfter: lastWalk,
      shelf: { at: lastWalk, units: story.nextDoor.onHand },
    }
  }
  if (is(story.held, plan) && state.held === 0) {
    const reason = 'Outer packs got wet. Kept apart until infection prevention has looked.'
    return { hold: { at: to - 9 * dayMs, units: story.held.units, reason } }
  }
  if (is(story.neverKeyed, plan)) return { unkeyed: { from: to - 75 * dayMs, to: to - 28 * dayMs } }
  if (is(story.lateBelieved, plan)) {
    const slot = lastSlot(plan, days, (s) => s.expectedOn < window.today)
    const late = slot && confirmedFor(slot, days, window.today)
    return late ? forced(late, 'late', { isAcknowledged: true, putAwayAt: null }) : {}
  }
  if (isOneOf(story.partReceived, plan)) {
    const slot = lastSlot(plan, days, (s) => s.sentAt <= to - 12 * hourMs)
    const isHere = plan.item.code === story.partReceived[0]?.item
    const putAwayAt = slot && isHere ? byTheWay(slot, to) : null
    return slot ? forced(slot, 'part', { isAcknowledged: true, putAwayAt }) : {}
  }
  return {}
}

/** After holidays the last delivery lies too far back to be believed: the supplier has then confirmed a later day. */
function confirmedFor(slot: Slot, days: readonly Day[], today: string): Slot {
  if (workingDaysBetween(slot.expectedOn, today) <= believedWorkingDays) return slot
  const later = days.filter((day) => day.date < today && isWorkingDay(day)).at(-1)
  return later ? { ...slot, expectedOn: later.date } : slot
}

/** What the supplier had at hand comes with another van: the next afternoon, or the evening of the same day. */
const byTheWay = (slot: Slot, to: number): number => slot.sentAt + (slot.sentAt + 27 * hourMs < to ? 27 : 8) * hourMs

const forced = (slot: Slot, name: string, more: Omit<ForcedOrder, 'slot' | 'name'>): Partial<Script> => ({
  noOrderAfter: slot.decidedAt - 1,
  forced: { slot, name, ...more },
})

/** Its last order was sent long enough ago to be believed no more, and what was left is used up. */
function emptyVital(plan: BinPlan, days: readonly Day[], window: SimWindow): Partial<Script> {
  const slot = lastSlot(plan, days, (s) => workingDaysBetween(s.expectedOn, window.today) >= hopelesslyLate)
  const gone = { at: window.to - 2.2 * dayMs, units: 0 }
  return slot
    ? { ...forced(slot, 'empty', { isAcknowledged: false, putAwayAt: null }), shelf: gone, noDemandAfter: gone.at }
    : { shelf: gone, noDemandAfter: gone.at }
}
