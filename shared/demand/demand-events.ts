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

/**
 * What is to be said of an interval. All but `merged` say why it tells nothing of use and is left out:
 * `before-start` opened before the history start, `excluded` by a person, `rise-unexplained` more found than the records
 * hold, `was-empty` nothing there to take, `closed` the place itself was shut, `too-old` over two years. `merged`: used,
 * added to a neighbour across a miscount.
 */
export type IntervalReason =
  'before-start' | 'excluded' | 'rise-unexplained' | 'was-empty' | 'closed' | 'too-old' | 'merged'

/** Use between two counts. Units of use and days; `weight` is for forgetting, 1 for the newest. */
export interface DemandInterval {
  openingOpId: string
  closingOpId: string
  openedAt: number
  closedAt: number
  days: number
  /** Epoch ms from which there was something to take; null: never. */
  stockedFrom: number | null
  /** Usual days on which there was something to take. */
  exposureDays: number
  /** Units used; negative when records and shelf disagree a little. */
  quantity: number
  /** Units of it that a planned change announced beside the usual use. */
  extraUnits: number
  /** The closing count found the shelf empty: at least this much was wanted. */
  censored: boolean
  weight: number
  used: boolean
  why: IntervalReason | null
  /** Units thrown away meanwhile; not use. */
  wastage: number
}
