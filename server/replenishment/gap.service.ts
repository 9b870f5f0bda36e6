import { arrivalOf, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { remainingSlots, spreadOverSlots, type HolidayGap } from '#shared/calendar/holiday-gap.ts'
import type { GapAhead } from '#shared/contracts/replenishment.ts'
import { gapOf } from '#shared/replenishment/gap-need.ts'
import { suggestedPacks } from '#shared/replenishment/suggested-packs.ts'
import { calendarOf, closedDays, placeTimes } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { isComputed } from '../policy/policy.service.ts'
import { draftsOf, preferredSupply } from './orders.service.ts'

type Supplier = Awaited<ReturnType<typeof preferredSupply>>[number]['supplier']

/** A holiday gap as the places of one supplier meet it. */
interface SupplierGap {
  supplier: Supplier
  calendar: OrderCalendar
  gap: HolidayGap
  name: string
  /** Places that would not last over it. */
  short: BinView[]
}

const iso = (ms: number): string => new Date(ms).toISOString()

/**
 * Gaps whose last order is at most ten days ahead, by supplier, the nearest last order first; a ward that is closed on
 * days of its own makes one of its own.
 *
 * What should stand at a place over the gap is worked out with its policy, at its own aim (`overGap`), and kept with
 * it: the mark on the gauge. It would not last when its position is at or below that.
 */
async function gapsAhead(db: Reader, moment: { now: number; timeZone: string }, views: BinView[]) {
  const itemIds = [...new Set(views.flatMap((v) => (v.row.itemId === null ? [] : [v.row.itemId])))]
  const supplies = new Map((await preferredSupply(db, itemIds)).map((s) => [s.itemId, s.supplier]))
  const closed = await closedDays(db)
  const byWard = new Map<string, SupplierGap | null>()
  const gaps = new Map<string, SupplierGap>()
  const find = (supplier: Supplier, view: BinView): SupplierGap | null => {
    const calendar = calendarOf(supplier, moment.timeZone, placeTimes(closed, supplier, view.row))
    const gap = 'leadDays' in calendar ? null : gapOf(calendar, moment.now)
    if (gap === null || 'leadDays' in calendar) return null
    // Wards that meet the same gap share it.
    const key = `${supplier.id} ${gap.lastOrderBy} ${gap.nextArrival}`
    const known = gaps.get(key) ?? { supplier, calendar, gap, name: closed.nameOf(gap.dates), short: [] }
    gaps.set(key, known)
    return known
  }
  for (const view of views.filter(isComputed)) {
    const supplier = supplies.get(view.row.itemId!)
    if (!supplier) continue
    const key = `${supplier.id} ${view.row.wardCalendarId}`
    if (!byWard.has(key)) byWard.set(key, find(supplier, view))
    const met = byWard.get(key)
    if (met && isShort(view, met.gap)) met.short.push(view)
  }
  return [...gaps.values()].sort(
    (a, b) =>
      a.gap.lastOrderBy - b.gap.lastOrderBy ||
      a.supplier.name.localeCompare(b.supplier.name) ||
      a.gap.nextArrival - b.gap.nextArrival,
  )
}

const isShort = ({ bin }: BinView, gap: HolidayGap): boolean =>
  bin.closed === null &&
  bin.lastCount !== null &&
  bin.gap !== null &&
  Date.parse(bin.gap.orderBy) === gap.lastOrderBy &&
  bin.position <= bin.gap.level

type Row = GapAhead['slots'][number]['rows'][number]

/** Filled up to what is needed and no more, at least one pack, as far as the shelf goes. */
function toRow({ bin }: BinView, drafts: ReadonlyMap<number, Row['inDraft']>): Row {
  const needed = bin.gap!.level
  const { position, packSize, capacity } = bin
  const wanted = { position, reorderPoint: needed, parLevel: needed, packSize }
  const packs = suggestedPacks({ ...wanted, capacity })
  return {
    ...bin,
    binId: bin.id,
    needed,
    suggested: { packs, packSize, units: packs * packSize },
    shelfTooSmall: packs < suggestedPacks({ ...wanted, capacity: null }),
    inDraft: drafts.get(Number(bin.id)) ?? null,
  }
}

/** Vital places first, then the widest share that is missing. */
const urgency = (row: Row): number =>
  Number(row.item?.ved === 'V') + (row.needed - row.position) / Math.max(1, row.needed)

const fitsNow = (row: Row): boolean =>
  !row.shelfTooSmall && (row.capacity === null || row.position + row.suggested.units <= row.capacity)

/** What would not last over each gap, spread over the orders that are left before it. */
export async function readGapAhead(
  db: Reader,
  clock: Clock,
  actor: Actor,
  query: { supplierId?: string },
): Promise<{ items: GapAhead[] }> {
  const { timeZone } = await readHospital(db)
  const moment = momentOf(clock, timeZone)
  const views = await viewBins(db, moment, { roomIds: actor.roomIds, retired: false })
  const all = await gapsAhead(db, { now: moment.now, timeZone }, views)
  const wanted = all.filter((g) => query.supplierId === undefined || String(g.supplier.id) === query.supplierId)
  const drafts = await draftsOf(
    db,
    wanted.flatMap((g) => g.short.map((v) => v.row.id)),
  )
  return { items: wanted.map((g) => toGapAhead(g, moment.now, drafts)) }
}

function toGapAhead(found: SupplierGap, now: number, drafts: ReadonlyMap<number, Row['inDraft']>): GapAhead {
  const { supplier, calendar, gap, name } = found
  const rows = found.short.map((view) => toRow(view, drafts)).sort((a, b) => urgency(b) - urgency(a))
  const slots = remainingSlots(calendar, now, gap.lastOrderBy)
  const chosen = spreadOverSlots(
    rows.map((row) => ({ id: row.id, urgency: urgency(row), fitsNow: fitsNow(row) })),
    slots,
  )
  return {
    gap: {
      supplierId: String(supplier.id),
      supplierName: supplier.name,
      name,
      from: gap.from,
      to: gap.to,
      lastOrderBy: iso(gap.lastOrderBy),
      lastArrival: iso(gap.lastArrival),
      nextArrival: iso(gap.nextArrival),
    },
    slots: slots.map((orderBy) => ({
      orderBy: iso(orderBy),
      arrives: iso(arrivalOf(calendar, orderBy)),
      rows: rows.filter((row) => chosen.get(row.id) === orderBy),
    })),
  }
}

/** The gaps that are near, in short: how many places would not last and stand in no draft yet. */
export async function gapsInShort(db: Reader, moment: { now: number; timeZone: string }, views: BinView[]) {
  const all = await gapsAhead(db, moment, views)
  const drafts = await draftsOf(
    db,
    all.flatMap((g) => g.short.map((v) => v.row.id)),
  )
  return all.map(({ supplier, gap, name, short }) => ({
    supplierId: String(supplier.id),
    supplierName: supplier.name,
    name,
    from: gap.from,
    lastOrderBy: iso(gap.lastOrderBy),
    places: short.filter((view) => !drafts.has(view.row.id)).length,
  }))
}
