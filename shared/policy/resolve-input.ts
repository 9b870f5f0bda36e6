import type { z } from 'zod'
import { demandMoments } from './demand-moments.ts'
import type { DemandMoments } from './demand-moments.ts'
import { PolicyInputError, refused } from './policy-input-error.ts'
import { PolicyInputSchema } from './policy-input.ts'
import type { POLICY_METHODS } from './policy-input.ts'

/** One counting interval with every default filled in. */
export interface ResolvedInterval {
  days: number
  exposureDays: number
  quantity: number
  censored: boolean
  weight: number
}

/** A policy input with every default of the interface filled in. */
export interface ResolvedInput {
  /** null when parameters are given as known */
  intervals: ResolvedInterval[] | null
  /** Plain moments of the intervals, empty endings read as they stand; null without any */
  moments: DemandMoments | null
  excludedIntervals: number
  demand: { meanPerDay: number; variancePerDay: number } | null
  leadTime: { meanDays: number; sdDays: number; observedDays: number[] }
  reviewPeriodDays: number
  protectionDays: number
  /** exposure days per calendar day of the protection interval; 1 unless given */
  exposureRatio: number
  protectionExposureDays: number
  wastagePerDay: number
  serviceLevel: number
  serviceMeasure: 'cycle' | 'fill'
  method: (typeof POLICY_METHODS)[number]
  estimate: 'plug-in' | 'predictive'
  prior: { nu0: number; w0: number; rate: { a: number; b: number } | null }
  order: {
    packSize: number
    minimum: number
    orderingCost: number | null
    unitCost: number | null
    holdingRatePerYear: number
    quantity: number | null
  }
  capacity: number | null
  shelfLifeDays: number | null
  pinnedFloor: number | null
  situation: { countOverdue: boolean; plannedChange: boolean }
}

type Parsed = z.output<typeof PolicyInputSchema>

/** Holding cost per year as a share of the price, where the caller names none. */
const USUAL_HOLDING_RATE = 0.2

/**
 * Checks an input and fills in the defaults of the interface.
 *
 * @throws {PolicyInputError} naming each field that is unknown, missing or out of range
 */
export function resolveInput(input: unknown): ResolvedInput {
  const parsed = PolicyInputSchema.safeParse(input)
  if (!parsed.success) throw toPolicyInputError(parsed.error)
  const data = parsed.data
  const intervals = data.intervals ?? null
  const demand = data.demand ?? null
  if (intervals && demand) throw refused('/demand', 'give either intervals or demand, not both')
  if (!intervals && !demand) throw refused('/intervals', 'give intervals, or demand with a mean per day')

  const all = intervals?.map(resolveInterval) ?? null
  const used = all ? rescaled(all.filter((interval) => interval.weight > 0)) : null
  const sdDays = data.leadTime.sdDays ?? 0
  const reviewPeriodDays = data.reviewPeriodDays ?? 0
  const protectionDays = data.leadTime.meanDays + reviewPeriodDays
  const protectionExposureDays = data.protectionExposureDays ?? protectionDays
  const exposureRatio = protectionDays > 0 ? protectionExposureDays / protectionDays : 1
  if (protectionDays === 0 && (sdDays > 0 || protectionExposureDays > 0))
    throw refused('/leadTime/meanDays', 'a lead time and review period of 0 days leave nothing to spread or to cover')
  return {
    intervals: used,
    moments: used && used.length > 0 ? demandMoments(used) : null,
    excludedIntervals: (all?.length ?? 0) - (used?.length ?? 0),
    demand: demand && {
      meanPerDay: demand.meanPerDay,
      variancePerDay: demand.variancePerDay ?? demand.meanPerDay,
    },
    leadTime: { meanDays: data.leadTime.meanDays, sdDays, observedDays: data.leadTime.observedDays ?? [] },
    reviewPeriodDays,
    protectionDays,
    exposureRatio,
    protectionExposureDays,
    wastagePerDay: data.wastagePerDay ?? 0,
    serviceLevel: data.serviceLevel,
    serviceMeasure: data.serviceMeasure ?? 'cycle',
    method: data.method ?? 'auto',
    estimate: data.estimate ?? 'predictive',
    prior: { nu0: data.prior?.nu0 ?? 4, w0: data.prior?.w0 ?? 2, rate: data.prior?.rate ?? null },
    order: resolveOrder(data.order),
    capacity: data.capacity ?? null,
    shelfLifeDays: data.shelfLifeDays ?? null,
    pinnedFloor: data.pinnedFloor ?? null,
    situation: {
      countOverdue: data.situation?.countOverdue ?? false,
      plannedChange: data.situation?.plannedChange ?? Math.abs(exposureRatio - 1) > 1e-9,
    },
  }
}

function resolveInterval(interval: NonNullable<Parsed['intervals']>[number]): ResolvedInterval {
  return {
    days: interval.days,
    exposureDays: interval.exposureDays ?? interval.days,
    quantity: interval.quantity,
    censored: interval.censored ?? false,
    weight: interval.weight ?? 1,
  }
}

/** Only the proportions of weights count; so small that their squares would vanish, they are raised together. */
function rescaled(intervals: ResolvedInterval[]): ResolvedInterval[] {
  const largest = intervals.reduce((most, { weight }) => Math.max(most, weight), 0)
  if (largest === 0 || largest > 1e-100) return intervals
  return intervals.map((interval) => ({ ...interval, weight: interval.weight / largest }))
}

function resolveOrder(order: Parsed['order']): ResolvedInput['order'] {
  return {
    packSize: order?.packSize ?? 1,
    minimum: order?.minimum ?? 0,
    orderingCost: order?.orderingCost ?? null,
    unitCost: order?.unitCost ?? null,
    holdingRatePerYear: order?.holdingRatePerYear ?? USUAL_HOLDING_RATE,
    quantity: order?.quantity ?? null,
  }
}

function toPolicyInputError(error: z.ZodError): PolicyInputError {
  const errors = error.issues.flatMap((issue) => {
    const pointer = issue.path.map((part) => `/${String(part).replace(/~/g, '~0').replace(/\//g, '~1')}`).join('')
    if (issue.code !== 'unrecognized_keys') return [{ pointer, detail: issue.message }]
    return issue.keys.map((key) => ({
      pointer: `${pointer}/${key.replace(/~/g, '~0').replace(/\//g, '~1')}`,
      detail: `unknown field ${key}`,
    }))
  })
  const [first, ...rest] = errors
  return new PolicyInputError([first ?? { pointer: '', detail: 'the input cannot be read' }, ...rest])
}
