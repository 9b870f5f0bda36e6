import { z } from 'zod'

/** Every method a caller may ask for; `auto` chooses (statistics: section 12, point 5). */
export const POLICY_METHODS = [
  'auto',
  'normal',
  'poisson',
  'negative-binomial',
  'gamma',
  'lognormal',
  'bootstrap',
  'empirical',
] as const

const number = (name: string) => z.number({ error: `${name} must be a number` })
const days = (name: string) =>
  number(name).min(0, `${name} must not be negative`).max(36_500, `${name} must be at most 36,500 days`)
const positiveDays = (name: string) => days(name).gt(0, `${name} must be more than 0`)
const units = (name: string) =>
  number(name)
    .int(`${name} must be a whole number of units`)
    .min(0, `${name} must not be negative`)
    .max(1e9, `${name} is too large`)
const money = (name: string) => number(name).min(0, `${name} must not be negative`).max(1e12, `${name} is too large`)

const Interval = z.strictObject({
  days: positiveDays('days'),
  exposureDays: positiveDays('exposureDays').nullish(),
  quantity: number('quantity').min(-1e9, 'quantity is too small').max(1e9, 'quantity is too large'),
  censored: z.boolean({ error: 'censored must be true or false' }).nullish(),
  weight: number('weight').min(0, 'weight must not be negative').max(1e6, 'weight is too large').nullish(),
})

const LeadTime = z.strictObject(
  {
    meanDays: days('meanDays'),
    sdDays: days('sdDays').nullish(),
    observedDays: z.array(days('observedDays')).max(2000, 'at most 2,000 observed lead times').nullish(),
  },
  { error: 'leadTime with meanDays is needed' },
)

const Prior = z.strictObject({
  nu0: number('nu0').gt(0, 'nu0 must be more than 0').max(1e6, 'nu0 is too large').nullish(),
  w0: number('w0').gt(0, 'w0 must be more than 0').max(1e6, 'w0 is too large').nullish(),
  rate: z
    .strictObject({
      a: number('a').gt(0, 'a must be more than 0').max(1e9, 'a is too large'),
      b: number('b').min(0, 'b must not be negative').max(1e9, 'b is too large'),
    })
    .nullish(),
})

const Order = z.strictObject({
  packSize: units('packSize').min(1, 'packSize must be at least 1').nullish(),
  minimum: units('minimum').nullish(),
  orderingCost: money('orderingCost').nullish(),
  unitCost: money('unitCost').nullish(),
  holdingRatePerYear: number('holdingRatePerYear')
    .gt(0, 'holdingRatePerYear must be more than 0')
    .max(100, 'holdingRatePerYear is too large')
    .nullish(),
  quantity: units('quantity').min(1, 'quantity must be at least 1').nullish(),
})

/**
 * What `POST /policy/preview` and `reorderPoint` take. Unknown fields are refused; `null` counts as absent.
 *
 * Units: days and units of use; `intervals` oldest first. Either `intervals` or `demand` is needed (checked in
 * `resolveInput`, which also fills in the defaults). An interval of weight 0 is left out and counted as excluded.
 */
export const PolicyInputSchema = z.strictObject(
  {
    intervals: z.array(Interval, { error: 'intervals must be a list' }).max(5000, 'at most 5,000 intervals').nullish(),
    demand: z
      .strictObject({
        meanPerDay: number('meanPerDay').min(0, 'meanPerDay must not be negative').max(1e9, 'meanPerDay is too large'),
        variancePerDay: number('variancePerDay')
          .min(0, 'variancePerDay must not be negative')
          .max(1e15, 'variancePerDay is too large')
          .nullish(),
      })
      .nullish(),
    leadTime: LeadTime,
    reviewPeriodDays: days('reviewPeriodDays').nullish(),
    protectionExposureDays: days('protectionExposureDays').nullish(),
    wastagePerDay: number('wastagePerDay').min(0, 'wastagePerDay must not be negative').max(1e9).nullish(),
    serviceLevel: number('serviceLevel')
      .min(0.5, 'serviceLevel must lie between 0.5 and 0.9999')
      .max(0.9999, 'serviceLevel must lie between 0.5 and 0.9999'),
    serviceMeasure: z.enum(['cycle', 'fill'], { error: 'serviceMeasure is cycle or fill' }).nullish(),
    method: z.enum(POLICY_METHODS, { error: `method is one of ${POLICY_METHODS.join(', ')}` }).nullish(),
    estimate: z.enum(['plug-in', 'predictive'], { error: 'estimate is plug-in or predictive' }).nullish(),
    prior: Prior.nullish(),
    order: Order.nullish(),
    capacity: units('capacity').nullish(),
    shelfLifeDays: positiveDays('shelfLifeDays').nullish(),
    pinnedFloor: units('pinnedFloor').nullish(),
    /** What only the caller knows, for the warnings. `plannedChange` left out: whether the days ahead weigh otherwise. */
    situation: z.strictObject({ countOverdue: z.boolean().nullish(), plannedChange: z.boolean().nullish() }).nullish(),
  },
  { error: (issue) => (issue.code === 'invalid_type' ? 'a policy input is an object' : undefined) },
)

/** The input of `reorderPoint`, before defaults; a policy row keeps it whole. */
export type PolicyInput = z.input<typeof PolicyInputSchema>
