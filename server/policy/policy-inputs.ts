import type { LearnedDemand } from '#shared/demand/learn-demand.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { Protection } from '../catalogue/calendar.service.ts'
import type { BinView } from '../counts/bin-view.service.ts'
import type { Aim } from '../review/aims.service.ts'
import type { SupplyRow } from './policy.repository.ts'
import type { PoolRow } from './pools.repository.ts'

interface Parts {
  view: BinView
  learned: LearnedDemand
  protection: Protection
  /** Usual days, and planned extra units as such, in the protection interval. */
  exposureAhead: number
  /** A planned change bears on the protection interval. */
  plannedChange: boolean
  /** The next planned count should have been made by now. */
  countOverdue: boolean
  /** Lead times seen, blended with the stated one; empty where none were. */
  observedDays: number[]
  pool: PoolRow | null
  supply: SupplyRow | null
  aim: Aim
  money: { orderingCost: number; holdingRatePerYear: number }
}

/** Everything a calculation is made from, kept whole with it: computing it again from this gives it exactly. */
export function policyInput(parts: Parts): PolicyInput {
  const { view, learned, protection, observedDays, pool, supply, aim, money } = parts
  const unitCost = supply?.price != null && supply.price > 0 ? supply.price : null
  const weighed = unitCost !== null && money.orderingCost > 0
  return {
    intervals: learned.forPolicy,
    leadTime: {
      meanDays: protection.leadMeanDays,
      sdDays: supply?.supplier?.leadTimeSd ?? 0,
      ...(observedDays.length > 0 ? { observedDays } : {}),
    },
    reviewPeriodDays: protection.reviewDays,
    ...exposurePart(parts.exposureAhead, protection),
    wastagePerDay: learned.wastagePerDay,
    serviceLevel: aim.target,
    method: 'auto',
    ...(pool === null ? {} : { prior: priorPart(pool) }),
    order: {
      packSize: view.bin.packSize,
      ...(unitCost === null ? {} : { unitCost }),
      ...(weighed ? { orderingCost: money.orderingCost, holdingRatePerYear: money.holdingRatePerYear } : {}),
    },
    capacity: view.bin.capacity,
    shelfLifeDays: supply?.shelfLifeDays ?? null,
    pinnedFloor: aim.floor,
    situation: { countOverdue: parts.countOverdue, plannedChange: parts.plannedChange },
  }
}

/** Said only where the days ahead are not usual days; a millionth of a day is none. */
function exposurePart(ahead: number, protection: Protection): Pick<PolicyInput, 'protectionExposureDays'> {
  const calendarDays = protection.leadMeanDays + protection.reviewDays
  return Math.abs(ahead - calendarDays) < 1e-6 || calendarDays === 0 ? {} : { protectionExposureDays: ahead }
}

const priorPart = (pool: PoolRow): NonNullable<PolicyInput['prior']> => ({
  nu0: pool.nu0,
  w0: pool.w0,
  ...(pool.rateA === null || pool.rateB === null ? {} : { rate: { a: pool.rateA, b: pool.rateB } }),
})
