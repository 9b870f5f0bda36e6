import type { Clock } from '../clock.ts'
import { listSuppliers } from '../catalogue/places.service.ts'
import { momentOf, openUnits, viewBins, type BinView } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import { binPlans, type BinPlan } from './bin-plan.ts'
import { listStaff } from './demo.repository.ts'
import { demoZone } from './simulation/simulator.ts'
import type { BinState } from './simulation/sim-types.ts'

/** A place of the plan as it stands in the database. */
export interface Place {
  plan: BinPlan
  view: BinView
  binId: number
  assignmentId: number
  itemId: number
}

/** What simulated names stand for. */
export interface Directory {
  /** By label code: places that still hold what the plan says; what people changed is left to them. */
  places: Map<string, Place>
  staff: Map<string, { id: number; passwordHash: string }>
  suppliers: Map<string, number>
}

export async function readDirectory(db: Reader, clock: Clock): Promise<Directory> {
  const views = await viewBins(db, momentOf(clock, demoZone), { roomIds: null, retired: false })
  const byCode = new Map(views.map((v) => [v.row.code, v]))
  const { items } = await listSuppliers(db, { page: 1, pageSize: 500, retired: 'no' })
  const suppliers = new Map(items.map((s) => [s.code, Number(s.id)]))
  const places = new Map<string, Place>()
  for (const plan of binPlans()) {
    const view = byCode.get(plan.code)
    if (!view || view.row.itemCode !== plan.item.code || view.bin.packSize !== plan.item.unitsPerOrder) continue
    if (view.row.assignmentId === null || view.row.itemId === null || !suppliers.has(plan.item.supplier)) continue
    places.set(plan.code, {
      plan,
      view,
      binId: view.row.id,
      assignmentId: view.row.assignmentId,
      itemId: view.row.itemId,
    })
  }
  return {
    places,
    staff: new Map((await listStaff(db)).map((s) => [s.staffCode, s])),
    suppliers,
  }
}

/** Where a place stands when the hospital lives on. `touched`: when a person last entered something there. */
export function stateOf(place: Place, from: number, touched: ReadonlyMap<number, Date>): BinState {
  const { plan, view } = place
  const { row } = view
  return {
    plan,
    startAt: Math.max(from, touched.get(place.binId)?.getTime() ?? 0),
    record: row.lastCountAt === null ? null : Math.max(0, row.onHand ?? 0),
    lastCountAt: row.lastCountAt?.getTime() ?? null,
    held: row.held ?? 0,
    open: view.openLines
      .filter((line) => line.assignmentId === place.assignmentId && line.sentAt !== null)
      .map((line) => ({
        line: `#${line.lineId}`,
        units: openUnits(line),
        sentAt: line.sentAt!.getTime(),
        expectedOn: line.expectedOn ?? '',
      })),
    reorderPoint: view.bin.reorderPoint ?? plan.reorderPoint,
    parLevel: view.bin.parLevel ?? plan.parLevel,
  }
}
