import { bootstrapLaw, windowLaw } from './daily-laws.ts'
import type { DemandLaw } from './demand-law.ts'
import { demandMoments } from './demand-moments.ts'
import { countedWastage } from './fitted.ts'
import type { Fitted } from './fitted.ts'
import { refused } from './policy-input-error.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

/**
 * The two methods that read daily records as they are: resampled days, or all overlapping windows. The protection
 * interval is rounded up to whole days. Source: statistics, 2.7.
 *
 * @throws {PolicyInputError} when the records are not daily, ended empty, are too few, or the lead time has a spread
 */
export function fitDaily(
  input: ResolvedInput,
  intervals: ResolvedInterval[],
  method: 'bootstrap' | 'empirical',
): Fitted {
  requireDaily(intervals, method)
  if (input.leadTime.sdDays > 0 && input.leadTime.observedDays.length === 0)
    throw refused('/leadTime/sdDays', `${method} takes a fixed lead time; give 0, or the observed days`)
  const moments = demandMoments(intervals)
  const wastage = countedWastage(input.wastagePerDay, moments.meanPerDay)
  const lawOverDays = (days: number): DemandLaw => {
    if (method === 'bootstrap') return bootstrapLaw(intervals, days)
    if (intervals.length < days)
      throw refused('/intervals', `empirical needs at least as many days as there are to cover (${days})`)
    return windowLaw(
      intervals.map((interval) => interval.quantity),
      days,
    )
  }
  return {
    method,
    meanPerDay: moments.meanPerDay,
    variancePerDay: moments.variancePerDay,
    dispersion: moments.dispersion,
    answersFill: true,
    model: method === 'bootstrap' ? 'daily use drawn again from the days seen' : 'sums of the overlapping windows seen',
    lawOver: ({ days, exposure }) => raised(lawOverDays(Math.ceil(exposure - 1e-9)), wastage * days),
  }
}

function requireDaily(intervals: ResolvedInterval[], method: string): void {
  intervals.forEach((interval, i) => {
    if (Math.abs(interval.days - 1) > 1e-9 || Math.abs(interval.exposureDays - 1) > 1e-9)
      throw refused(`/intervals/${i}/days`, `${method} needs daily records: every interval must be 1 day`)
    if (interval.censored)
      throw refused(`/intervals/${i}/censored`, `${method} cannot read days that ended empty; take negative-binomial`)
    if (method === 'bootstrap' && !(Number.isInteger(interval.quantity) && interval.quantity >= 0))
      throw refused(`/intervals/${i}/quantity`, 'bootstrap needs whole quantities of 0 or more')
  })
}

/** The same law with a fixed amount added to every outcome. */
function raised(law: DemandLaw, by: number): DemandLaw {
  if (by === 0) return law
  return {
    mean: law.mean + by,
    variance: law.variance,
    ...(law.slack === undefined ? {} : { slack: law.slack }),
    cdf: (r) => law.cdf(r - by),
    loss: (r) => law.loss!(r - by),
  }
}
