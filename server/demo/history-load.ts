import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { recordInBulk } from '../counts/bulk.service.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { listKnown } from './demo.repository.ts'
import { entriesOf, sequences, writeDevices } from './entries.ts'
import { lineIds, numbered, writeOrders } from './orders-load.ts'
import { readDirectory } from './places.ts'
import { simulate, untouched, windowOf } from './simulation/simulator.ts'

/** How far the demo hospital has come stands in the audit log, in the transaction of what it tells of. */
export const marker = (tx: Tx, at: Date, action: string, after: unknown): Promise<void> =>
  audit(tx, { at, userId: null, action, subject: 'demo', subjectId: 1, after })

interface First {
  began: number
  to: number
  /** A load that was cut short had written its orders. */
  hasOrders: boolean
}

/**
 * The history of the first start: orders in one transaction, then one for each place, so that a load cut short goes on
 * with the first place that has no entries yet. The simulation gives the same again.
 */
export async function loadFirstHistory(db: Db, clock: Clock, first: First, say: (line: string) => void): Promise<void> {
  const { began, to } = first
  const known = await readDirectory(db, clock)
  const window = windowOf({ from: began, to, began }, { last: true, withStories: true })
  const { orders, ops } = simulate(
    [...known.places.values()].map((place) => untouched(place.plan, began)),
    window,
  )
  const now = new Date(to)
  if (!first.hasOrders)
    await inTransaction(db, async (tx) => {
      await writeOrders(tx, orders, known)
      await marker(tx, now, 'demo-orders', { orders: orders.length })
    })
  const lines = await lineIds(db, orders, numbered(orders, new Map()), known)
  const sequence = sequences([...ops.values()].flat())
  let done = 0
  await inLanes([...ops.values()], async (own) => {
    const isThere = own.length > 0 && (await listKnown(db, [own[0]!.opId])).size > 0
    if (!isThere) await inTransaction(db, (tx) => recordInBulk(tx, now, entriesOf(own, known, lines, sequence)))
    done += 1
    if (done % 60 === 0 || done === ops.size) say(`Demo hospital: ${done} of ${ops.size} places have their history.`)
  })
  await writeDevices(db, [...ops.values()].flat())
  await inTransaction(db, (tx) => marker(tx, now, 'demo-lived', { to: now.toISOString() }))
}

const lanes = 3

/** Several at a time: while the database writes one, the next is made. After a failure nothing new is begun. */
async function inLanes<T>(list: readonly T[], work: (one: T) => Promise<void>): Promise<void> {
  let next = 0
  const lane = async (): Promise<void> => {
    while (next < list.length) {
      const one = list[next]!
      next += 1
      try {
        await work(one)
      } catch (error) {
        next = list.length
        throw error
      }
    }
  }
  const ended = await Promise.allSettled(Array.from({ length: lanes }, lane))
  const failed = ended.find((end) => end.status === 'rejected')
  if (failed) throw failed.reason
}
