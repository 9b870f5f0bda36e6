import { and, asc, eq, gt, inArray, isNotNull, isNull, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/mysql-core'
import { bins, rooms, suppliers, wards } from '../catalogue/catalogue.tables.ts'
import { movements, operations } from '../counts/counts.tables.ts'
import type { Reader, Tx } from '../db/client.ts'
import { leadTimeObservations } from '../policy/policy.tables.ts'
import { orderLines, orders } from './replenishment.tables.ts'

export type ObservationRow = typeof leadTimeObservations.$inferInsert

/** Entries saved at once have consecutive numbers and the same moment, to a little. */
const savedAtOnce = { entries: 20, seconds: 2 }

/** Sent order lines with whom they were ordered from and the ward they are for; ids above `after`, oldest first. */
export async function listSentLines(db: Reader, filter: { ids: number[] } | { after: number; limit: number }) {
  const wanted = 'ids' in filter ? inArray(orderLines.id, filter.ids) : gt(orderLines.id, filter.after)
  const rows = db
    .select({
      id: orderLines.id,
      itemId: orderLines.itemId,
      units: orderLines.units,
      cancelledUnits: orderLines.cancelledUnits,
      sentAt: orders.sentAt,
      supplier: suppliers,
      wardCalendarId: wards.calendarId,
    })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .innerJoin(suppliers, eq(suppliers.id, orders.supplierId))
    .innerJoin(bins, eq(bins.id, orderLines.binId))
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(wards, eq(wards.id, rooms.wardId))
    .where(and(wanted, isNotNull(orders.sentAt)))
    .orderBy(asc(orderLines.id))
  return 'ids' in filter ? rows : rows.limit(filter.limit)
}
export type SentLineRow = Awaited<ReturnType<typeof listSentLines>>[number]

/**
 * What arrived and was put away of some order lines; entries taken back are left out. A put-away was written by the
 * question about a rise when it was saved at once with a count of the same place whose basis says so: the question's
 * put-aways carry no sign of their own.
 */
export async function listArrivals(db: Reader, orderLineIds: number[]) {
  const withdrawn = alias(movements, 'withdrawn')
  return db
    .select({
      orderLineId: movements.orderLineId,
      type: movements.type,
      at: movements.effectiveAt,
      quantity: movements.quantity,
      byRiseQuestion: sql<number>`exists (
        select 1 from ${operations} asked
        where asked.bin_id = ${movements.binId} and asked.type = 'count' and asked.device_id = ${movements.deviceId}
          and asked.local_seq > ${movements.localSeq}
          and asked.local_seq <= ${movements.localSeq} + ${savedAtOnce.entries}
          and asked.effective_at between ${movements.effectiveAt} - interval ${savedAtOnce.seconds} second
            and ${movements.effectiveAt} + interval ${savedAtOnce.seconds} second
          and json_value(asked.payload, '$.basis.answer') = 'put-away')`.mapWith(Number),
    })
    .from(movements)
    .leftJoin(withdrawn, and(eq(withdrawn.targetOpId, movements.opId), eq(withdrawn.type, 'withdraw')))
    .where(
      and(
        inArray(movements.orderLineId, orderLineIds),
        inArray(movements.type, ['receipt', 'arrival']),
        isNull(withdrawn.id),
      ),
    )
}

/** Order lines that some entries name. */
export async function linesOfEntries(db: Reader, opIds: string[]): Promise<number[]> {
  if (opIds.length === 0) return []
  const rows = await db
    .selectDistinct({ id: movements.orderLineId })
    .from(movements)
    .where(and(inArray(movements.opId, opIds), isNotNull(movements.orderLineId)))
  return rows.map((r) => r.id!)
}

/** Order lines of the put-aways that one phone saved just before an entry of its own. */
export async function linesSavedBefore(db: Reader, opId: string): Promise<number[]> {
  const own = alias(movements, 'own')
  const rows = await db
    .selectDistinct({ id: movements.orderLineId })
    .from(movements)
    .innerJoin(own, and(eq(own.opId, opId), eq(own.binId, movements.binId), eq(own.deviceId, movements.deviceId)))
    .where(
      and(
        eq(movements.type, 'receipt'),
        isNotNull(movements.orderLineId),
        sql`${movements.localSeq} between ${own.localSeq} - ${savedAtOnce.entries} and ${own.localSeq}`,
      ),
    )
  return rows.map((r) => r.id!)
}

/** The observations of some lines become these; a line without one has none any more. */
export async function replaceObservations(tx: Tx, orderLineIds: number[], rows: ObservationRow[]): Promise<void> {
  const kept = new Set(rows.map((r) => r.orderLineId))
  const gone = orderLineIds.filter((id) => !kept.has(id))
  if (gone.length) await tx.delete(leadTimeObservations).where(inArray(leadTimeObservations.orderLineId, gone))
  if (rows.length === 0) return
  await tx
    .insert(leadTimeObservations)
    .values(rows)
    .onDuplicateKeyUpdate({
      set: {
        arrivedAt: sql`values(arrived_at)`,
        days: sql`values(days)`,
        delayDays: sql`values(delay_days)`,
      },
    })
}
