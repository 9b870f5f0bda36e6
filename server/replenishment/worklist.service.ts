import { DateTime } from 'luxon'
import type { WorklistRow } from '#shared/contracts/replenishment.ts'
import { runOutProbability, runOutRange, type RunOutInput } from '#shared/replenishment/run-out.ts'
import { suggestedPacks } from '#shared/replenishment/suggested-packs.ts'
import { closedDays, orderWindow, placeTimes } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, pageOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { demandOf } from '../policy/policy.service.ts'
import { draftsOf, preferredSupply } from './orders.service.ts'

type Supply = Awaited<ReturnType<typeof preferredSupply>>[number]

/** What is known of one bin's way to empty and to be filled again. */
export interface Outlook {
  view: BinView
  supply: Supply | null
  /** Last moment to order, and when that order would come. */
  orderBy: Date | null
  firstArrival: Date | null
  /** The next delivery: one on its way, else that of an order placed now. */
  nextArrival: Date | null
  /** Estimated chance of running out before the next arrival. */
  risk: number
  outBy: { early: string | null; late: string | null }
}

interface Context {
  now: Date
  timeZone: string
}

/** Outlook of every bin given: estimates from counts, by one rule everywhere. */
export async function outlookOf(db: Reader, context: Context, views: BinView[]): Promise<Outlook[]> {
  const itemIds = [...new Set(views.flatMap((v) => (v.row.itemId === null ? [] : [v.row.itemId])))]
  const supplies = new Map((await preferredSupply(db, itemIds)).map((s) => [s.itemId, s]))
  const demands = await demandOf(db)
  const windowOf = await windows(db, context)
  return views.map((view) => {
    const supply = view.row.itemId === null ? null : (supplies.get(view.row.itemId) ?? null)
    const window = supply ? windowOf(supply.supplier, view) : null
    const onItsWay = arrivalUnderWay(view, context)
    const nextArrival = onItsWay ?? window?.firstArrival ?? null
    const demand = demands.get(view.row.id)
    const stock = stockOf(view, demand)
    const range = stock ? runOutRange(stock, context.now.getTime()) : { early: null, late: null }
    const localDay = (at: number | null): string | null =>
      at === null ? null : DateTime.fromMillis(at, { zone: context.timeZone }).toISODate()
    return {
      view,
      supply,
      orderBy: window?.firstOrderBy ?? null,
      firstArrival: window?.firstArrival ?? null,
      nextArrival,
      risk: riskOf(view, stock, nextArrival),
      outBy: { early: localDay(range.early), late: localDay(range.late) },
    }
  })
}

/** Next order and its arrival; places of one ward share those of a supplier. */
async function windows(db: Reader, context: Context) {
  const closed = await closedDays(db)
  const known = new Map<string, ReturnType<typeof orderWindow>>()
  return (supplier: Supply['supplier'], view: BinView): ReturnType<typeof orderWindow> => {
    const key = `${supplier.id} ${view.row.wardCalendarId}`
    const window =
      known.get(key) ?? orderWindow(supplier, context.timeZone, context.now, placeTimes(closed, supplier, view.row))
    known.set(key, window)
    return window
  }
}

/** The day of the earliest believed delivery, at the usual hour of deliveries. */
function arrivalUnderWay(view: BinView, context: Context): Date | null {
  if (view.bin.expectedOn === null) return null
  const due = DateTime.fromISO(view.bin.expectedOn, { zone: context.timeZone }).set({ hour: 14 })
  return due.toMillis() > context.now.getTime() ? due.toJSDate() : null
}

function stockOf(view: BinView, demand: { meanPerDay: number; dispersion: number } | undefined): RunOutInput | null {
  if (!view.facts.lastCount || !demand || demand.meanPerDay <= 0) return null
  return {
    onHand: view.bin.onHand,
    since: view.facts.lastCount.effectiveAt,
    meanPerDay: demand.meanPerDay,
    dispersion: demand.dispersion,
  }
}

/** An empty shelf has run out already, whatever use is expected. */
function riskOf(view: BinView, stock: RunOutInput | null, until: Date | null): number {
  if (view.bin.states.includes('empty')) return 1
  return stock && until ? runOutProbability(stock, until.getTime()) : 0
}

function whyOf(outlook: Outlook): string[] {
  const { bin } = outlook.view
  const onOrder = bin.onOrder ? `${bin.onOrder} on order` : 'none on order'
  const gap = bin.under
    ? `${bin.under} under its reorder point, ${bin.reorderPoint}`
    : `at its reorder point, ${bin.reorderPoint}`
  const demand = outlook.view.facts.meanPerDay
  return [
    `${bin.onHand} on hand and ${onOrder} leave it ${gap}.`,
    ...(demand === null
      ? ['Not enough counts to estimate its use.']
      : [`About ${figure(demand)} are used a day (an estimate).`]),
    ...(bin.parLevel === null ? [] : [`Filled up to ${bin.parLevel} in packs of ${bin.packSize}.`]),
  ]
}

const figure = (n: number): string => String(Number(n < 1 ? n.toPrecision(2) : n.toFixed(1)))

function toRow(outlook: Outlook, draft: { orderId: string; number: string } | undefined): WorklistRow {
  const { bin } = outlook.view
  const packs = suggestedPacks({
    position: bin.position,
    reorderPoint: bin.reorderPoint ?? 0,
    parLevel: bin.parLevel,
    packSize: bin.packSize,
    capacity: bin.capacity,
  })
  return {
    ...bin,
    binId: bin.id,
    supplierId: outlook.supply ? String(outlook.supply.supplier.id) : null,
    supplierName: outlook.supply?.supplier.name ?? null,
    orderBy: outlook.orderBy?.toISOString() ?? null,
    risk: outlook.risk,
    outBy: outlook.outBy,
    nextArrival: outlook.nextArrival?.toISOString() ?? null,
    suggested: { packs, packSize: bin.packSize, units: packs * bin.packSize },
    why: whyOf(outlook),
    inDraft: draft ?? null,
    price: outlook.supply?.price ?? null,
  }
}

interface ListQuery {
  roomId?: string
  supplierId?: string
  page: number
  pageSize: number
}

/** Vital before the rest at equal risk, then the wider gap; ids keep the order stable. */
const byRisk = (a: WorklistRow, b: WorklistRow): number =>
  b.risk - a.risk ||
  Number(b.item?.ved === 'V') - Number(a.item?.ved === 'V') ||
  b.under / Math.max(1, b.reorderPoint ?? 1) - a.under / Math.max(1, a.reorderPoint ?? 1) ||
  Number(a.id) - Number(b.id)

/** Exactly the bins in state `below`, most at risk first. */
export async function readWorklist(db: Reader, clock: Clock, actor: Actor, query: ListQuery) {
  const { timeZone } = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, timeZone), {
    roomIds: actor.roomIds,
    roomId: query.roomId === undefined ? undefined : Number(query.roomId),
    retired: false,
  })
  const below = views.filter((v) => v.bin.states.includes('below'))
  const outlooks = await outlookOf(db, { now: clock.now(), timeZone }, below)
  const drafts = await draftsOf(
    db,
    below.map((v) => v.row.id),
  )
  const rows = outlooks
    .map((o) => toRow(o, drafts.get(o.view.row.id)))
    .filter((r) => query.supplierId === undefined || r.supplierId === query.supplierId)
    .sort(byRisk)
  return pageOf(rows, query)
}
