import type { Operation } from '#shared/contracts/counts.ts'
import { leadTimeObservation } from '#shared/demand/lead-times.ts'
import { arrivalIfOrderedAt, closedDays, placeTimes, type ClosedDays } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import * as repo from './lead-times.repository.ts'

const dayMs = 86_400_000

/** What was learnt of delivery times follows an entry just written: a put-away, an arrival, or one taken back. */
export async function observeEntry(tx: Tx, operation: Operation): Promise<void> {
  const lines = await linesOf(tx, operation)
  if (lines.length) await observeLeadTimes(tx, lines)
}

async function linesOf(tx: Tx, operation: Operation): Promise<number[]> {
  switch (operation.type) {
    case 'receipt':
    case 'arrival':
      return operation.orderLineId === undefined ? [] : [Number(operation.orderLineId)]
    case 'movement.withdraw':
      return repo.linesOfEntries(tx, [operation.targetOpId])
    case 'count':
      // The count that a question was asked of comes after the put-aways that answered it.
      return operation.basis?.answer === 'put-away' ? repo.linesSavedBefore(tx, operation.opId) : []
    default:
      return []
  }
}

/**
 * Keeps one observation for each order line that has come (statistics 4.0), with its days since sending and its days
 * beyond the moment the calendar stated at sending; takes away those that hold no longer.
 */
export async function observeLeadTimes(tx: Tx, orderLineIds: number[]): Promise<void> {
  if (orderLineIds.length === 0) return
  const observe = await observer(tx)
  await observe(orderLineIds, await repo.listSentLines(tx, { ids: orderLineIds }))
}

const linesAtOnce = 500

/** Observes every order line on record, piece by piece: after a history was written whole. */
export async function observeAllLeadTimes(db: Db): Promise<void> {
  for (let after = 0; ;) {
    const lines = await repo.listSentLines(db, { after, limit: linesAtOnce })
    if (lines.length === 0) return
    after = lines.at(-1)!.id
    const ids = lines.map((l) => l.id)
    await inTransaction(db, async (tx) => (await observer(tx))(ids, lines))
  }
}

async function observer(tx: Tx) {
  const { timeZone } = await readHospital(tx)
  const stated = statedArrivals(timeZone, await closedDays(tx))
  return async (ids: number[], lines: repo.SentLineRow[]): Promise<void> => {
    const arrivals = await repo.listArrivals(tx, ids)
    const rows = lines.flatMap((line): repo.ObservationRow[] => {
      const sentAt = line.sentAt!
      const found = leadTimeObservation({
        sentAt: sentAt.getTime(),
        units: line.units,
        cancelledUnits: line.cancelledUnits,
        arrivals: arrivals
          .filter((a) => a.orderLineId === line.id)
          .map((a) => ({
            way: a.type === 'arrival' ? 'arrival' : 'put-away',
            at: a.at.getTime(),
            quantity: a.quantity,
            byRiseQuestion: a.byRiseQuestion === 1,
          })),
      })
      if (!found) return []
      return [
        {
          supplierId: line.supplier.id,
          itemId: line.itemId,
          orderLineId: line.id,
          orderedAt: sentAt,
          arrivedAt: new Date(found.arrivedAt),
          days: (found.arrivedAt - sentAt.getTime()) / dayMs,
          delayDays: (found.arrivedAt - stated(line)) / dayMs,
        },
      ]
    })
    await repo.replaceObservations(tx, ids, rows)
  }
}

/** When each line should have come by its supplier's calendar; lines of one order and ward share the answer. */
function statedArrivals(timeZone: string, closed: ClosedDays): (line: repo.SentLineRow) => number {
  const known = new Map<string, number>()
  return ({ supplier, sentAt, wardCalendarId }) => {
    const key = `${supplier.id} ${wardCalendarId} ${sentAt!.getTime()}`
    const at =
      known.get(key) ??
      arrivalIfOrderedAt(supplier, timeZone, sentAt!, placeTimes(closed, supplier, { wardCalendarId })).getTime()
    known.set(key, at)
    return at
  }
}
