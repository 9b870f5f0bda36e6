import type { Operation } from '#shared/contracts/counts.ts'
import { seenDevices, type BulkEntry } from '../counts/bulk.service.ts'
import type { Db } from '../db/client.ts'
import type { Directory, Place } from './places.ts'
import { demoZone } from './simulation/simulator.ts'
import type { SimOp } from './simulation/sim-types.ts'

/** Version the simulated phones say they run. */
const appVersion = 'demo'
/** Sequence numbers of devices are seconds since then: they go on however the history was cut. */
const sequenceOrigin = Date.UTC(2020, 0, 1)

/** Numbers of each device's entries: rising with time. */
export function sequences(ops: readonly SimOp[]): Map<string, number> {
  const last = new Map<string, number>()
  const numbers = new Map<string, number>()
  for (const op of [...ops].sort((a, b) => a.at - b.at || (a.opId < b.opId ? -1 : 1))) {
    const next = Math.max((last.get(op.device) ?? 0) + 1, Math.floor((op.at - sequenceOrigin) / 1000))
    last.set(op.device, next)
    numbers.set(op.opId, next)
  }
  return numbers
}

/** What simulated people did, as their phones would have sent it, in the order in which it came in. */
export function entriesOf(
  ops: readonly SimOp[],
  known: Directory,
  lines: ReadonlyMap<string, number>,
  sequence: ReadonlyMap<string, number>,
): BulkEntry[] {
  return [...ops]
    .sort((a, b) => a.recordedAt - b.recordedAt || a.at - b.at)
    .map((op) => {
      const place = known.places.get(op.bin)!
      const other = op.toBin === undefined ? null : known.places.get(op.toBin)!
      return {
        operation: operationOf(op, place, other, lines, sequence.get(op.opId) ?? 0),
        userId: known.staff.get(op.person)!.id,
        deviceId: op.device,
        appVersion,
        end: endOf(place),
        other: other && endOf(other),
        receivedAt: new Date(op.recordedAt),
        effectiveAt: new Date(op.at),
      }
    })
}

const endOf = ({ binId, assignmentId, itemId, view, plan }: Place): BulkEntry['end'] => ({
  binId,
  roomId: view.row.roomId,
  assignmentId,
  itemId,
  packSize: plan.item.unitsPerOrder,
})

/** An entry as a phone makes it. */
function operationOf(
  op: SimOp,
  place: Place,
  other: Place | null,
  lines: ReadonlyMap<string, number>,
  localSeq: number,
): Operation {
  const every = {
    opId: op.opId,
    v: 1,
    localSeq,
    binId: String(place.binId),
    itemId: String(place.itemId),
    deviceTime: new Date(op.at).toISOString(),
    tz: demoZone,
  }
  const { quantity } = op
  const orderLineId = op.line === undefined ? undefined : lineOf(op.line, lines)
  const reason = op.reason ?? ''
  switch (op.type) {
    case 'count':
    case 'take':
      return { ...every, type: op.type, quantity }
    case 'count.correct':
      return { ...every, type: op.type, quantity, targetOpId: op.targetOpId ?? '', reason }
    case 'receipt':
      return { ...every, type: op.type, quantity, ...(orderLineId === undefined ? {} : { orderLineId }) }
    case 'arrival':
      return { ...every, type: op.type, quantity, orderLineId: orderLineId ?? '' }
    case 'transfer':
      return { ...every, type: op.type, quantity, direction: 'out', toBinId: String(other?.binId) }
    case 'wastage':
    case 'hold':
      return { ...every, type: op.type, quantity, reason }
  }
}

/** `#id` is a line that stood in the database before. */
const lineOf = (line: string, lines: ReadonlyMap<string, number>): string =>
  line.startsWith('#') ? line.slice(1) : String(lines.get(line))

/** Writes the phones down that were used. */
export async function writeDevices(db: Db, ops: readonly SimOp[]): Promise<void> {
  const spans = new Map<string, { first: number; last: number }>()
  for (const { device, recordedAt } of ops) {
    const span = spans.get(device) ?? { first: recordedAt, last: recordedAt }
    spans.set(device, { first: Math.min(span.first, recordedAt), last: Math.max(span.last, recordedAt) })
  }
  const devices = [...spans].map(([deviceId, span]) => ({
    deviceId,
    appVersion,
    first: new Date(span.first),
    last: new Date(span.last),
  }))
  await seenDevices(db, devices)
}
