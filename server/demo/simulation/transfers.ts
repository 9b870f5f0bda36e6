import { drawInteger, drawOne } from '#shared/kernel/random.ts'
import type { BinPlan } from '../bin-plan.ts'
import { story } from '../story.ts'
import { atHour, dayMs, type Day } from './days.ts'
import { keyed } from './keyed.ts'

/** Units carried from one place to another of the same item. */
export interface PlannedTransfer {
  at: number
  fromBin: string
  toBin: string
  units: number
}

/** How often a ward borrows an item from another, per item and day. */
const borrowedADay = 0.004
/** Of a full delivery, what does not fit goes to the overflow place; on these days of the history. */
const overflowDays = { out: 31, back: 102 }

/** Whose numbers a story needs as they are. */
const leftAlone = new Set<string>([story.emptyVital, ...story.neverCounted].map((place) => place.item))

/** Borrowing between wards, and a main place and its overflow place evened out twice. */
export function plannedTransfers(plans: readonly BinPlan[], days: readonly Day[], began: number): PlannedTransfer[] {
  const byItem = new Map<string, BinPlan[]>()
  for (const plan of plans.filter((p) => p.overflowOf === null && !leftAlone.has(p.item.code)))
    byItem.set(plan.item.code, [...(byItem.get(plan.item.code) ?? []), plan])
  const shared = [...byItem.values()].filter((places) => places.length > 1)
  const borrowed = days.flatMap((day) => shared.flatMap((places) => borrow(places, day)))
  return [...borrowed, ...plans.flatMap((plan) => evenedOut(plan, days, began))].sort((a, b) => a.at - b.at)
}

function borrow(places: readonly BinPlan[], day: Day): PlannedTransfer[] {
  const random = keyed('borrow', places[0]!.item.code, day.ordinal)
  if (random() >= borrowedADay) return []
  const from = drawOne(random, places)
  const to = drawOne(
    random,
    places.filter((p) => p !== from),
  )
  const most = Math.max(1, Math.min(6, Math.floor(from.reorderPoint / 8)))
  return [
    {
      at: atHour(day, 9 + random() * 11),
      fromBin: from.code,
      toBin: to.code,
      units: drawInteger(random, 1, most),
    },
  ]
}

function evenedOut(plan: BinPlan, days: readonly Day[], began: number): PlannedTransfer[] {
  if (plan.overflowOf === null) return []
  const main = plan.overflowOf
  const units = plan.item.unitsPerOrder
  const on = (after: number, fromBin: string, toBin: string): PlannedTransfer[] =>
    days
      .filter((day) => Math.floor((day.base - began) / dayMs) === after)
      .map((day) => ({ at: atHour(day, 14.4), fromBin, toBin, units }))
  return [...on(overflowDays.out, main, plan.code), ...on(overflowDays.back, plan.code, main)]
}
