import { DateTime } from 'luxon'
import { audit, type AuditEntry } from '../audit/audit.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import { insertOrderLines, insertOrders, listSentLines, lockLastNumber, setLastNumber } from './demo.repository.ts'
import type { Directory } from './places.ts'
import { demoZone } from './simulation/simulator.ts'
import type { SimOrder } from './simulation/sim-types.ts'

const yearOf = (order: SimOrder): number => DateTime.fromMillis(order.sentAt, { zone: demoZone }).year

/** Orders in the form of `sendOrder`: B, two digits of the year, a running number. */
const numberOf = (year: number, n: number): string => `B${String(year % 100)}-${String(n).padStart(5, '0')}`

/** Gives each order its number, going on where each year's last one stopped. */
export function numbered(orders: readonly SimOrder[], last: ReadonlyMap<number, number>): string[] {
  const counters = new Map(last)
  return orders.map((order) => {
    const year = yearOf(order)
    const n = (counters.get(year) ?? 0) + 1
    counters.set(year, n)
    return numberOf(year, n)
  })
}

/** Writes sent orders with their lines and audit rows, numbers drawn under their lock. @returns their numbers */
export async function writeOrders(tx: Tx, orders: readonly SimOrder[], known: Directory): Promise<string[]> {
  const last = new Map<number, number>()
  for (const year of [...new Set(orders.map(yearOf))].sort()) last.set(year, await lockLastNumber(tx, year))
  const numbers = numbered(orders, last)
  for (const [year, before] of last)
    await setLastNumber(tx, year, before + orders.filter((o) => yearOf(o) === year).length)
  const ids = await insertOrders(
    tx,
    orders.map((order, i) => orderRow(order, numbers[i]!, known)),
  )
  await insertOrderLines(
    tx,
    orders.flatMap((order, i) => order.lines.map((line) => lineRow(line, ids[i]!, known))),
  )
  await audit(tx, ...orders.flatMap((order, i) => auditRows(order, ids[i]!, numbers[i]!, known)))
  return numbers
}

const at = (ms: number | null): Date | null => (ms === null ? null : new Date(ms))
const idOf = (known: Directory, staffCode: string): number => known.staff.get(staffCode)!.id

function orderRow(order: SimOrder, number: string, known: Directory) {
  const by = idOf(known, order.coordinator)
  return {
    number,
    supplierId: known.suppliers.get(order.supplier)!,
    state: order.state,
    outsideReference: order.outsideReference,
    version: 2,
    createdBy: by,
    createdAt: new Date(order.createdAt),
    sentBy: by,
    sentAt: new Date(order.sentAt),
    expectedOn: order.expectedOn,
    acknowledgedAt: at(order.acknowledgedAt),
    cancelledAt: at(order.cancelledAt),
    cancelReason: order.cancelReason,
  }
}

function lineRow(line: SimOrder['lines'][number], orderId: number, known: Directory) {
  const { binId, assignmentId, itemId, plan } = known.places.get(line.bin)!
  return {
    orderId,
    binId,
    assignmentId,
    itemId,
    packs: line.packs,
    packSize: plan.item.unitsPerOrder,
    orderUnit: plan.item.orderUnit,
    units: line.units,
    cancelledUnits: line.cancelledUnits,
    price: plan.item.price,
  }
}

function auditRows(order: SimOrder, orderId: number, number: string, known: Directory): AuditEntry[] {
  const entry = { userId: idOf(known, order.coordinator), subject: 'order', subjectId: orderId }
  const rows: AuditEntry[] = [
    {
      ...entry,
      at: new Date(order.createdAt),
      action: 'order-drafted',
      after: {
        supplierId: String(known.suppliers.get(order.supplier)),
        lines: order.lines.map((l) => ({ binId: String(known.places.get(l.bin)!.binId), packs: l.packs })),
      },
    },
    {
      ...entry,
      at: new Date(order.sentAt),
      action: 'order-sent',
      after: { number, expectedOn: order.expectedOn },
    },
  ]
  if (order.acknowledgedAt !== null)
    rows.push({ ...entry, at: new Date(order.acknowledgedAt), action: 'order-acknowledged', after: {} })
  if (order.cancelledAt !== null)
    rows.push({ ...entry, at: new Date(order.cancelledAt), action: 'order-cancelled', reason: order.cancelReason })
  return rows
}

/** Ids of order lines by the keys the simulation knows them by. */
export async function lineIds(
  db: Reader,
  orders: readonly SimOrder[],
  numbers: readonly string[],
  known: Directory,
): Promise<Map<string, number>> {
  const since = Math.min(...orders.map((o) => o.sentAt)) - 1
  const rows = orders.length ? await listSentLines(db, new Date(since)) : []
  const byPlace = new Map(rows.map((r) => [`${r.number}/${r.binId}`, r.id]))
  return new Map(
    orders.flatMap((order, i) =>
      order.lines.map(
        (line) => [line.key, byPlace.get(`${numbers[i]}/${known.places.get(line.bin)!.binId}`)!] as const,
      ),
    ),
  )
}
