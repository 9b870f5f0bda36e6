import type { BinPlan } from '../bin-plan.ts'

/** Times are epoch ms, quantities whole units of use, people staff codes, places their label codes. */
export interface SimWindow {
  /** Nothing up to here is made again. */
  from: number
  /** Nothing is dated after this. */
  to: number
  /** When the hospital's history begins. */
  began: number
  zone: string
  /** The hospital's own date at `to`. */
  today: string
  /** The world stops here: rounds are finished and deliveries that are due have come. */
  last: boolean
  /** Long enough for the stories to be told: see `ending.ts`. */
  withStories: boolean
}

/** An order of the past that is not all on the shelf yet. */
export interface OpenLine {
  /** Key of a simulated line, or `#id` of one in the database. */
  line: string
  units: number
  sentAt: number
  expectedOn: string
}

/** What is known of a place where the window begins. */
export interface BinState {
  plan: BinPlan
  /** Where this place's own window begins: later than `from` where a person was at work there. */
  startAt: number
  /** By the record; null before the first count. */
  record: number | null
  /** Since when the shelf was used without the record knowing; null before the first count. */
  lastCountAt: number | null
  held: number
  open: OpenLine[]
  reorderPoint: number
  parLevel: number
}

export type SimOpType = 'count' | 'count.correct' | 'receipt' | 'arrival' | 'transfer' | 'wastage' | 'take' | 'hold'

export interface SimOp {
  opId: string
  bin: string
  type: SimOpType
  quantity: number
  at: number
  recordedAt: number
  person: string
  device: string
  reason?: string
  targetOpId?: string
  line?: string
  toBin?: string
}

export interface SimLine {
  key: string
  bin: string
  packs: number
  units: number
  cancelledUnits: number
}

export interface SimOrder {
  key: string
  supplier: string
  /** What a person decided; how far it has come is read from the ledger. */
  state: 'sent' | 'acknowledged' | 'cancelled' | 'recorded-elsewhere'
  coordinator: string
  outsideReference: string | null
  createdAt: number
  sentAt: number
  expectedOn: string
  acknowledgedAt: number | null
  cancelledAt: number | null
  cancelReason: string | null
  lines: SimLine[]
}

export interface Simulated {
  orders: SimOrder[]
  /** In the order of `at`, by the place that the entry names. */
  ops: Map<string, SimOp[]>
}
