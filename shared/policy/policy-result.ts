/** The way a reorder point was worked out, as answered. */
export type AnsweredMethod =
  | 'negative-binomial-mixture'
  | 'student'
  | 'gamma-poisson'
  | 'normal'
  | 'poisson'
  | 'negative-binomial'
  | 'gamma'
  | 'lognormal'
  | 'bootstrap'
  | 'empirical'
  | 'entered'

/** Every warning a result may carry; the list is closed. */
export const POLICY_WARNINGS = [
  'no-data',
  'few-intervals',
  'pooled',
  'all-zero',
  'all-censored',
  'lumpy',
  'autocorrelated',
  'trend',
  'stated-lead-time',
  'count-overdue',
  'planned-change',
  'shelf-cannot-hold',
  'expiry-cap',
  'minimum-order',
  'floor',
] as const
export type PolicyWarning = (typeof POLICY_WARNINGS)[number]

/** One line of the explanation: what, how with the values put in, and the outcome. */
export interface ExplanationRow {
  label: string
  formula: string
  value: string
}

/**
 * What `reorderPoint` answers. Units: units of use and days; figures are not rounded but for whole units.
 *
 * `demand` is null with no interval at all and no rate of like wards; the reorder point is then null too unless a floor is pinned, and the level
 * someone entered is used. `variancePerDay` and `dispersion` are null where the data cannot tell (one interval, no use).
 */
export interface PolicyResult {
  method: AnsweredMethod
  /** Units: order when the position is at or below this. */
  reorderPoint: number | null
  /** Smallest whole number of units that meets the target, before floor and shelf. */
  computedReorderPoint: number | null
  safetyStock: number | null
  orderQuantity: number | null
  parLevel: number | null
  demand: {
    meanPerDay: number
    variancePerDay: number | null
    dispersion: number | null
    intervals: number
    days: number
    censoredIntervals: number
    excludedIntervals: number
    sufficient: boolean
  } | null
  leadTime: { meanDays: number; sdDays: number }
  reviewPeriodDays: number
  protectionDays: number
  protectionDemand: { mean: number; variance: number } | null
  /** The chosen method's own probability (or fill rate) at `reorderPoint`: an estimate. */
  achieved: number | null
  /** Share of units served from the shelf at `reorderPoint` and `orderQuantity`; null where the method has no loss. */
  fillRate: number | null
  /** Share of time with stock on the shelf, at the same levels; null where the method has no loss. */
  readyRate: number | null
  /** The service the shelf can keep where it is too small for the aim (`shelf-cannot-hold`), else null. */
  shelfCarries: number | null
  /** Where use is lumpy or comes in runs: the highest aim such counts could confirm without a model, else null. */
  dataCarry: number | null
  /** Units of `computedReorderPoint` that more counts would save (or add); null where the method makes no allowance. */
  forFewCounts: number | null
  /** The plain z-formula on the same data, and what the chosen method gives that level. Null where there is no variance. */
  textbookNormal: { reorderPoint: number; achieved: number } | null
  warnings: PolicyWarning[]
  explanation: ExplanationRow[]
}
