import type { Clock } from '../clock.ts'
import { recordInBulk } from '../counts/bulk.service.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { listTouched } from './demo.repository.ts'
import { entriesOf, sequences, writeDevices } from './entries.ts'
import { marker } from './history-load.ts'
import { lineIds, writeOrders } from './orders-load.ts'
import { readDirectory, stateOf } from './places.ts'
import { dayMs } from './simulation/days.ts'
import { simulate, windowOf } from './simulation/simulator.ts'
import type { SimOp, SimWindow } from './simulation/sim-types.ts'

/** Shorter than this nothing is worth simulating. */
const leastMs = 30 * 60_000
/** From this length on the stories are told anew at its end. */
const storyMs = 16 * dayMs
const lastPieceMs = 21 * dayMs
const pieceMs = 30 * dayMs

/** Where a long absence is cut; the last piece is long enough for the stories. */
export function piecesOf(from: number, to: number): number[] {
  const ends: number[] = []
  for (let at = from; to - at > lastPieceMs + dayMs;) {
    at = Math.min(at + pieceMs, to - lastPieceMs)
    ends.push(at)
  }
  return [...ends, to]
}

/** Lives on from `from` to now, each piece in one transaction. @returns whether anything was lived through */
export async function liveOn(db: Db, clock: Clock, span: { began: number; from: number }): Promise<boolean> {
  const to = clock.now().getTime()
  if (to - span.from < leastMs) return false
  const ends = piecesOf(span.from, to)
  const touched = await listTouched(db, new Date(span.from))
  let { from } = span
  for (const end of ends) {
    const last = end === to
    const window = windowOf({ began: span.began, from, to: end }, { last, withStories: last && end - from >= storyMs })
    const made = await inTransaction(db, (tx) => livePiece(tx, clock, window, touched))
    await writeDevices(db, made)
    from = end
  }
  return true
}

async function livePiece(
  tx: Tx,
  clock: Clock,
  window: SimWindow,
  touched: ReadonlyMap<number, Date>,
): Promise<SimOp[]> {
  const known = await readDirectory(tx, clock)
  const states = [...known.places.values()].map((place) => stateOf(place, window.from, touched))
  const { orders, ops } = simulate(
    states.filter((s) => s.startAt < window.to),
    window,
  )
  const lines = await lineIds(tx, orders, await writeOrders(tx, orders, known), known)
  const all = [...ops.values()].flat()
  const now = new Date(window.to)
  await recordInBulk(tx, now, entriesOf(all, known, lines, sequences(all)))
  await marker(tx, now, 'demo-lived', { to: now.toISOString() })
  return all
}
