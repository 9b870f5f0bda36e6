import { seededRandom } from '#shared/kernel/random.ts'
import { suggestedPacks } from '#shared/replenishment/suggested-packs.ts'
import { movableClock, type Clock } from '../clock.ts'
import { momentOf, viewBins } from '../counts/bin-view.service.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { createOrder } from '../replenishment/orders.service.ts'
import { demoSeed } from './bin-plan.ts'
import { binsInDrafts } from './demo.repository.ts'
import { marker } from './history-load.ts'
import { writeOrders } from './orders-load.ts'
import { readDirectory, type Directory, type Place } from './places.ts'
import { dayMs, lastOfficeMoment } from './simulation/days.ts'
import { demoZone } from './simulation/simulator.ts'
import { coordinatorOf, slotOfOrder } from './simulation/supply.ts'
import type { SimOrder } from './simulation/sim-types.ts'
import { story } from './story.ts'

/** Rows a coordinator finds in the morning: about one counted place in ten. */
const healthyRows = 30
const mostRows = 34
const draftRows = 3
const minuteMs = 60_000

interface Settling {
  to: Date
  /** Places where people were at work are theirs to order for. */
  touched: ReadonlyMap<number, Date>
  /** A short absence: what stands is left as it is. */
  isShort: boolean
}

/**
 * The coordinators' last hour before the world stops: they order what is too much for one morning's list, and what
 * would make the story ward's round longer than told; one draft is left open.
 */
export async function settleWorklist(db: Db, clock: Clock, settling: Settling): Promise<void> {
  await inTransaction(db, async (tx) => {
    const known = await readDirectory(tx, clock)
    if (!settling.isShort) {
      await orderSome(tx, known, settling)
      await leaveDraft(tx, clock, known, settling)
    }
    await marker(tx, settling.to, 'demo-settled', { to: settling.to.toISOString() })
  })
}

const isStory = ({ plan }: Place): boolean =>
  plan.room.code === story.emptyVital.room && plan.item.code === story.emptyVital.item

async function orderSome(tx: Tx, known: Directory, { to, touched }: Settling): Promise<void> {
  const drafted = await binsInDrafts(tx)
  const places = [...known.places.values()]
  const mayOrder = (p: Place): boolean => !touched.has(p.binId) && !drafted.has(p.binId) && !isStory(p)
  const below = places.filter((p) => p.view.bin.states.includes('below'))
  const tooMany = below.length > mostRows ? below.length - healthyRows : 0
  const random = seededRandom(`${demoSeed}/settle/${to.getTime()}`)
  const chosen = below
    .filter(mayOrder)
    .map((place) => ({ place, draw: random() }))
    .sort((a, b) => a.draw - b.draw)
    .slice(0, tooMany)
    .map((c) => c.place)
  const old = new Set<string>(story.oldCounts.map((p) => p.item))
  const firsts = places.filter(
    (p) =>
      p.plan.room.ward === story.due.ward &&
      p.view.bin.states.includes('count-first') &&
      !(p.plan.room.code === story.due.room && old.has(p.plan.item.code)) &&
      mayOrder(p),
  )
  const orders = lastOrders([...chosen, ...firsts], to)
  await writeOrders(tx, orders, known)
  const binIds = orders.flatMap((o) => o.lines.map((l) => known.places.get(l.bin)!.binId))
  await touchBins(tx, to, binIds, null)
}

/** One order for each supplier and coordinator, sent in the last working hour. */
function lastOrders(places: readonly Place[], to: Date): SimOrder[] {
  const orders = new Map<string, SimOrder>()
  const sentAt = lastOfficeMoment(to.getTime() - 20 * minuteMs, demoZone)
  for (const { plan, view } of places) {
    const coordinator = coordinatorOf(plan.room)
    const key = `${plan.item.supplier}/${coordinator}`
    const order = orders.get(key) ?? {
      key,
      supplier: plan.item.supplier,
      state: 'sent' as const,
      coordinator,
      outsideReference: null,
      createdAt: sentAt - 6 * minuteMs,
      sentAt,
      expectedOn: slotOfOrder(plan.item.supplier, coordinator, sentAt).expectedOn,
      acknowledgedAt: null,
      cancelledAt: null,
      cancelReason: null,
      lines: [],
    }
    orders.set(key, order)
    const packSize = plan.item.unitsPerOrder
    const packs = suggestedPacks({
      position: view.bin.position,
      reorderPoint: view.bin.reorderPoint ?? plan.reorderPoint,
      parLevel: view.bin.parLevel,
      packSize,
      capacity: view.bin.capacity,
    })
    order.lines.push({ key: `${key}/${plan.code}`, bin: plan.code, packs, units: packs * packSize, cancelledUnits: 0 })
  }
  return [...orders.values()]
}

/** A draft somebody began and did not send. */
async function leaveDraft(tx: Tx, clock: Clock, known: Directory, { to, touched }: Settling): Promise<void> {
  if ((await binsInDrafts(tx)).size > 0) return
  const views = await viewBins(tx, momentOf(clock, demoZone), { roomIds: null, retired: false })
  const below = new Set(views.filter((v) => v.bin.states.includes('below')).map((v) => v.row.id))
  const open = [...known.places.values()].filter((p) => below.has(p.binId) && !touched.has(p.binId) && !isStory(p))
  const supplier = ['FEN', 'MAR', 'CS', 'TAR'].find((code) => open.some((p) => p.plan.item.supplier === code))
  if (!supplier) return
  const rows = open.filter((p) => p.plan.item.supplier === supplier).slice(0, draftRows)
  const begun = movableClock(new Date(lastOfficeMoment(to.getTime() - 5 * minuteMs, demoZone)))
  const coordinator = known.staff.get('3011')!
  const actor = { id: coordinator.id, role: 'coordinator' as const, roomIds: null, authzVersion: 1 }
  await createOrder(tx, begun, actor, {
    supplierId: String(known.suppliers.get(supplier)),
    lines: rows.map((p) => ({ binId: String(p.binId), packs: 1 })),
  })
}

/** A shorter absence than this leaves the list as people left it. */
export const shortAbsenceMs = dayMs / 2
