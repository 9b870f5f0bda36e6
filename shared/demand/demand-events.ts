/**
 * One standing row of the ledger of one bin under one assignment, in effective order (see `shared/ledger/fold.ts`).
 * `quantity`: found for a count, the signed change for the rest. `effectiveAt`: epoch ms.
 */
export interface DemandEvent {
  opId: string
  type: string
  quantity: number
  effectiveAt: number
}

/** Why an interval says nothing about use. */
export type IntervalReason = 'was-empty' | 'rise-unexplained' | 'too-old'

/** Use between two counts. Units of use and days; `weight` is for forgetting, 1 for the newest. */
export interface DemandInterval {
  openingOpId: string
  closingOpId: string
  openedAt: number
  closedAt: number
  days: number
  /** Days on which there was something to take. */
  exposureDays: number
  /** Units used; negative when records and shelf disagree a little. */
  quantity: number
  /** The closing count found the shelf empty: at least this much was wanted. */
  censored: boolean
  weight: number
  used: boolean
  why: IntervalReason | null
  /** Units thrown away meanwhile; not use. */
  wastage: number
}
