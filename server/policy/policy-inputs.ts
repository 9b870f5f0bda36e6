import type { LearnedDemand } from '#shared/demand/learn-demand.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { Protection } from '../catalogue/calendar.service.ts'
import type { BinView } from '../counts/bin-view.service.ts'
import type { Aim } from '../review/aims.service.ts'
import type { SupplyRow } from './policy.repository.ts'

interface Parts {
  view: BinView
  learned: LearnedDemand
  protection: Protection
  supply: SupplyRow | null
  aim: Aim
  money: { orderingCost: number; holdingRatePerYear: number }
}

/** Everything a calculation is made from, kept whole with it: computing it again from this gives it exactly. */
export function policyInput({ view, learned, protection, supply, aim, money }: Parts): PolicyInput {
  const unitCost = supply?.price != null && supply.price > 0 ? supply.price : null
  const weighed = unitCost !== null && money.orderingCost > 0
  return {
    intervals: learned.forPolicy,
    leadTime: { meanDays: protection.leadMeanDays, sdDays: supply?.supplier?.leadTimeSd ?? 0 },
    reviewPeriodDays: protection.reviewDays,
    wastagePerDay: learned.wastagePerDay,
    serviceLevel: aim.target,
    method: 'auto',
    order: {
      packSize: view.bin.packSize,
      ...(unitCost === null ? {} : { unitCost }),
      ...(weighed ? { orderingCost: money.orderingCost, holdingRatePerYear: money.holdingRatePerYear } : {}),
    },
    capacity: view.bin.capacity,
    shelfLifeDays: supply?.shelfLifeDays ?? null,
    pinnedFloor: aim.floor,
  }
}
