import { drawNegativeBinomial, drawPoisson } from '#shared/kernel/random-laws.ts'
import type { Random } from '#shared/kernel/random.ts'
import { dispersionOf, type BinPlan } from '../bin-plan.ts'
import { atHour, dayMs, type Day } from './days.ts'
import { keyed } from './keyed.ts'

/** Monday first; mean 1. */
const weekdayWeights = [1.26, 1.3, 1.26, 1.3, 1.18, 0.4, 0.3]
const lumpEveryDays = 11
/** Days of history after which a stopped item is not wanted any more. */
const stopsAfterDays = 110
const firstHour = 6
const lastHour = 23.5

function unitsOn(plan: BinPlan, day: Day, began: number, random: Random): number {
  const mean = plan.meanPerDay
  switch (plan.shape) {
    case 'lumpy':
      return random() < 1 / lumpEveryDays ? 1 + drawPoisson(random, Math.max(0, mean * lumpEveryDays - 1)) : 0
    case 'weekday':
      return drawNegativeBinomial(random, mean * (weekdayWeights[day.weekday - 1] ?? 1), dispersionOf.weekday)
    case 'stopped':
      return day.base > began + stopsAfterDays * dayMs ? 0 : drawPoisson(random, mean)
    case 'bursty':
      return drawNegativeBinomial(random, mean, dispersionOf.bursty)
    case 'steady':
      return drawPoisson(random, mean)
  }
}

/** The moments at which one unit is wanted on that day, oldest first. A lump is wanted within the hour. */
export function demandTimes(plan: BinPlan, day: Day, began: number): number[] {
  if (plan.meanPerDay === 0) return []
  const random = keyed('demand', plan.code, day.ordinal)
  const units = unitsOn(plan, day, began, random)
  if (units === 0) return []
  const start = firstHour + random() * (lastHour - firstHour - 1)
  return Array.from({ length: units }, () =>
    atHour(day, plan.shape === 'lumpy' ? start + random() : firstHour + random() * (lastHour - firstHour)),
  ).sort((a, b) => a - b)
}
