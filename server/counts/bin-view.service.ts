import { DateTime } from 'luxon'
import type { Bin } from '#shared/contracts/bins.ts'
import { problem } from '#shared/contracts/problems.ts'
import { formatShelfCode, foldShelfCode } from '#shared/barcode/shelf-code.ts'
import { binStatesOf, position, under, type BinFacts } from '#shared/ledger/bin-states.ts'
import { isBelieved } from '#shared/replenishment/believed.ts'
import type { Clock } from '../clock.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import {
  listBinRows,
  listOpenLines,
  listOverflow,
  type BinFilter,
  type BinRow,
  type OpenLine,
} from './bin-view.repository.ts'

export type { BinRow, OpenLine } from './bin-view.repository.ts'

/** One bin as lists show it, with the row it was made of for those who compute on. */
export interface BinView {
  bin: Bin
  row: BinRow
  openLines: OpenLine[]
  facts: BinFacts
  /** Its overflow places, whose stock is part of its own. */
  overflow: OverflowPlace[]
}

interface OverflowPlace {
  binId: number
  assignmentId: number | null
  onHand: number
}

interface Moment {
  now: number
  /** The hospital's own date, YYYY-MM-DD. */
  today: string
}

export const momentOf = (clock: Clock, timeZone: string): Moment => {
  const now = clock.now()
  return { now: now.getTime(), today: DateTime.fromJSDate(now, { zone: timeZone }).toISODate() ?? '' }
}

/** Units of a line still to be put away. */
export const openUnits = (line: OpenLine): number => Math.max(0, line.units - line.putAway - line.cancelledUnits)

/** Bins by filter, computed by query: nothing here is stored, so nothing can go stale. */
export async function viewBins(db: Reader, moment: Moment, filter: BinFilter): Promise<BinView[]> {
  const rows = await listBinRows(db, filter)
  const ids = rows.map((r) => r.id)
  const wide = ids.length > 2000
  const lines = groupBy(await listOpenLines(db, wide ? null : ids), (l) => l.binId)
  const overflow = groupBy(await listOverflow(db, ids), (o) => o.mainId ?? 0)
  return rows.map((row) => toView(row, lines.get(row.id) ?? [], overflow.get(row.id) ?? [], moment))
}

function toView(row: BinRow, openLines: OpenLine[], overflow: OverflowPlace[], moment: Moment): BinView {
  const mine = openLines.filter((l) => l.assignmentId === row.assignmentId && openUnits(l) > 0)
  const believed = mine.filter((l) => isBelieved(l.expectedOn, moment.today, l.confirmedAt !== null))
  const onOrder = believed.reduce((sum, l) => sum + openUnits(l), 0)
  const arrived = believed.reduce((sum, l) => sum + Math.min(openUnits(l), Math.max(0, l.arrived - l.putAway)), 0)
  const raw = row.onHand ?? 0
  const onHand = Math.max(0, raw) + overflow.reduce((sum, o) => sum + Math.max(0, o.onHand), 0)
  const isOverflow = row.overflowOf !== null
  const reorderPoint = isOverflow ? null : row.policyId === null ? row.enteredReorderPoint : row.reorderPoint
  const closed = closureAt(row.closed, moment.now)
  const facts: BinFacts = {
    kind: row.kind,
    isOverflow,
    hasItem: row.itemId !== null,
    onHand,
    held: row.held ?? 0,
    onOrder,
    hasLateOrder: mine.some((l) => l.expectedOn !== null && l.expectedOn < moment.today),
    lastCount:
      row.lastCountAt && row.lastCountQuantity !== null
        ? { quantity: row.lastCountQuantity, effectiveAt: row.lastCountAt.getTime() }
        : null,
    reorderPoint,
    meanPerDay: row.meanPerDay === null ? null : Number(row.meanPerDay),
    countEveryDays: row.countEveryDays,
    isQuiet: closed !== null && (closed.flagsFrom === null || moment.now < Date.parse(closed.flagsFrom)),
  }
  const parLevel = isOverflow ? null : row.policyId === null ? row.enteredPar : row.parLevel
  const bin = toBin(row, facts, parLevel, believed, arrived, raw, moment.now)
  bin.closed = closed && { from: closed.from, until: closed.until }
  bin.gap = gapAt(row.gap, moment.now)
  return { bin, row, openLines: mine, facts, overflow }
}

interface Closure {
  from: string
  until: string | null
  /** From then on flags serve the reopening; null: not while it is shut. */
  flagsFrom: string | null
}

/** JSON columns come back as text or as what they hold, by the driver's knowledge of the column. */
const parsed = <T>(value: unknown): T | null =>
  (typeof value === 'string' ? (JSON.parse(value) as T | null) : (value as T | null)) ?? null

/** The planned closure that is on at a moment. */
function closureAt(stored: unknown, now: number): Closure | null {
  const closed = parsed<Closure>(stored)
  const isOn =
    closed !== null && Date.parse(closed.from) <= now && (closed.until === null || now < Date.parse(closed.until))
  return isOn ? closed : null
}

/** The level to reach before a holiday gap, until the last order before it. */
function gapAt(stored: unknown, now: number): Bin['gap'] {
  const gap = parsed<NonNullable<Bin['gap']>>(stored)
  return gap !== null && now <= Date.parse(gap.orderBy) ? gap : null
}

function toBin(
  row: BinRow,
  facts: BinFacts,
  parLevel: number | null,
  believed: OpenLine[],
  arrived: number,
  raw: number,
  now: number,
): Bin {
  return {
    id: String(row.id),
    code: row.code,
    display: formatShelfCode(row.code),
    kind: row.kind,
    overflowOf: row.overflowOf === null ? null : String(row.overflowOf),
    roomId: String(row.roomId),
    roomName: row.roomName,
    itemId: row.itemId === null ? null : String(row.itemId),
    item:
      row.itemId === null
        ? null
        : {
            id: String(row.itemId),
            code: row.itemCode ?? '',
            name: row.itemName ?? '',
            unitOfUse: row.unitOfUse ?? '',
            countUnit: row.countUnit ?? '',
            ved: row.ved ?? 'D',
          },
    bay: row.bay,
    shelf: row.shelf,
    walkOrder: row.walkOrder,
    capacity: row.capacity,
    packSize: row.packSize ?? 1,
    orderUnit: row.orderUnit ?? row.unitOfUse ?? '',
    onHand: facts.onHand,
    held: facts.held,
    onOrder: facts.onOrder,
    arrived,
    position: position(facts),
    lastCount: facts.lastCount
      ? { quantity: facts.lastCount.quantity, effectiveAt: new Date(facts.lastCount.effectiveAt).toISOString() }
      : null,
    reorderPoint: facts.reorderPoint,
    parLevel,
    under: under(facts),
    states: binStatesOf(facts, now),
    countEveryDays: row.countEveryDays,
    expectedOn:
      believed
        .map((l) => l.expectedOn)
        .filter((d): d is string => d !== null)
        .sort()[0] ?? null,
    closed: null,
    gap: null,
    recordsDisagree: raw < 0,
    enteredReorderPoint: row.enteredReorderPoint,
    enteredPar: row.enteredPar,
    retired: row.retiredAt !== null,
  }
}

/** One bin in the actor's rooms. @throws {Problem} not-found */
export async function viewBin(
  db: Reader,
  moment: Moment,
  actor: Pick<Actor, 'roomIds'>,
  binId: number,
): Promise<BinView> {
  const [view] = await viewBins(db, moment, { roomIds: actor.roomIds, binIds: [binId], retired: false })
  if (!view) throw problem('not-found')
  return view
}

interface ListQuery {
  roomId?: string
  state?: Bin['states'][number]
  q?: string
  code?: string
  itemId?: string
  retired: 'yes' | 'no'
  page: number
  pageSize: number
}

/** A page of bins in scope. */
export async function listBins(db: Reader, moment: Moment, actor: Actor, query: ListQuery) {
  const views = await viewBins(db, moment, {
    roomIds: actor.roomIds,
    roomId: query.roomId === undefined ? undefined : Number(query.roomId),
    code: query.code === undefined ? undefined : foldShelfCode(query.code),
    q: query.q,
    itemId: query.itemId === undefined ? undefined : Number(query.itemId),
    retired: query.retired === 'yes',
  })
  const wanted = query.state === undefined ? views : views.filter((v) => v.bin.states.includes(query.state!))
  return pageOf(
    wanted.map((v) => v.bin),
    query,
  )
}

/** Cuts a page out of a whole list. */
export function pageOf<T>(all: T[], query: { page: number; pageSize: number }) {
  const start = (query.page - 1) * query.pageSize
  return {
    items: all.slice(start, start + query.pageSize),
    total: all.length,
    page: query.page,
    pageSize: query.pageSize,
  }
}

export function groupBy<T>(rows: readonly T[], keyOf: (row: T) => number): Map<number, T[]> {
  const groups = new Map<number, T[]>()
  for (const row of rows) {
    const group = groups.get(keyOf(row))
    if (group) group.push(row)
    else groups.set(keyOf(row), [row])
  }
  return groups
}
