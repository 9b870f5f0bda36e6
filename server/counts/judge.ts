import { Operation, type OperationType } from '#shared/contracts/counts.ts'
import { wordIssue } from '#shared/contracts/wording.ts'
import { foldShelfCode } from '#shared/barcode/shelf-code.ts'
import { effectiveTime } from '#shared/ledger/effective-time.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import {
  findBin,
  findBinOfItemInRoom,
  findOrderLine,
  listAssignments,
  listMovementsOfOps,
  roomExists,
  wasRefused,
  type MovementRow,
} from './counts.repository.ts'
import { NotYet, Refusal } from './refusal.ts'

/** The newest form of an entry this server knows; all before it are still taken. */
export const newestVersion = 1
const ownHours = 14
const sheetDays = 7
const hourMs = 3_600_000

const coordinatorOnly = new Set<OperationType>(['arrival', 'release'])

/** One end of an entry: a bin and the assignment its rows belong to. */
export interface End {
  binId: number
  roomId: number
  assignmentId: number
  itemId: number
  packSize: number
}

/** An entry that may be written: where, when and about what. */
export interface Judged {
  operation: Operation
  end: End
  other: End | null
  effectiveAt: Date
  statedAt: Date
  flags: string[]
  targetEnds: ('bin' | 'other')[]
  /** What a person has to look at although the entry is taken in. */
  attention: string | null
}

/** Reads the form of an entry. @throws {Refusal | NotYet} */
export function readOperation(item: Record<string, unknown>): Operation {
  if (typeof item.v === 'number' && Number.isInteger(item.v) && item.v > newestVersion) {
    throw new NotYet(
      'newer-version',
      'This entry was made by a newer app than this server knows. It stays on the phone and is sent again.',
    )
  }
  const parsed = Operation.safeParse(item)
  if (parsed.success) return parsed.data
  const issue = parsed.error.issues[0]
  const where = issue?.path.join('.') || 'entry'
  throw new Refusal('invalid-operation', `${where}: ${issue ? wordIssue(issue) : 'cannot be read'}`.slice(0, 300), true)
}

/** Decides whether and where an entry counts. @throws {Refusal | NotYet} */
export async function judge(db: Reader, actor: Actor, operation: Operation, receivedAt: Date): Promise<Judged> {
  if (coordinatorOnly.has(operation.type) && actor.role !== 'coordinator') {
    throw new Refusal('out-of-scope', 'Your role does not include this kind of entry.', false)
  }
  const time = timeOf(operation, receivedAt)
  const statedAt = new Date(time.effectiveAt)
  if ('targetOpId' in operation) return judgeAboutOther(db, actor, operation, statedAt, receivedAt, time.suspect)
  const bin = await binOf(db, operation)
  const other = operation.type === 'transfer' ? await otherEnd(db, operation, bin) : null
  const nowhere = operation.type === 'transfer' && other === null
  const inScope = scopeOf(actor, bin.roomId) || (other !== null && scopeOf(actor, other.roomId))
  if (!inScope) throw new Refusal('out-of-scope', 'This place is outside your rooms.', false)
  const { end, changed } = await endOf(
    db,
    bin,
    operation.itemId === undefined ? null : Number(operation.itemId),
    statedAt,
  )
  if ('orderLineId' in operation && operation.orderLineId !== undefined)
    await checkLine(db, Number(operation.orderLineId), end, bin)
  const flags = [...(time.suspect ? ['clock-suspect'] : []), ...(changed ? ['item-changed'] : [])]
  return {
    operation,
    end,
    other: other ? (await endOf(db, other, end.itemId, statedAt)).end : null,
    effectiveAt: statedAt,
    statedAt,
    flags,
    targetEnds: ['bin'],
    attention: nowhere
      ? 'Stock was moved to a room that has no place for this item. Put it where it belongs and count it.'
      : null,
  }
}

function timeOf(operation: Operation, receivedAt: Date): { effectiveAt: number; suspect: boolean } {
  const at = (text: string | null | undefined): number | null => (text == null ? null : Date.parse(text))
  const observedAt = at(operation.observedAt)
  if (observedAt !== null) {
    if (operation.observedSource !== 'typed-sheet') {
      throw new Refusal('invalid-operation', 'observedSource: say where the stated time comes from', true)
    }
    if (observedAt < receivedAt.getTime() - sheetDays * 24 * hourMs || observedAt > receivedAt.getTime() + 60_000) {
      throw new Refusal('invalid-operation', `observedAt: a sheet may be typed in up to ${sheetDays} days later`, true)
    }
  }
  return effectiveTime(
    {
      deviceTime: Date.parse(operation.deviceTime),
      estTime: at(operation.estTime),
      lastContact: at(operation.lastContact),
      offsetErrMs: operation.offsetErrMs ?? null,
      observedAt,
    },
    receivedAt.getTime(),
  )
}

const scopeOf = (actor: Actor, roomId: number): boolean => actor.roomIds === null || actor.roomIds.includes(roomId)

interface BinRef {
  id: number
  roomId: number
  overflowOf: number | null
}

async function binOf(db: Reader, operation: Operation): Promise<BinRef> {
  if (operation.type === 'arrival' && !operation.binId && !operation.binCode) {
    const line = await findOrderLine(db, Number(operation.orderLineId))
    const bin = line && (await findBin(db, { id: line.binId }))
    if (!bin) throw new Refusal('invalid-operation', 'orderLineId: there is no such line', false)
    return bin
  }
  const byId = operation.binId ? await findBin(db, { id: Number(operation.binId) }) : null
  const byCode = operation.binCode ? await findBin(db, { code: foldShelfCode(operation.binCode) }) : null
  const bin = operation.binId ? byId : byCode
  if (!bin) {
    throw new Refusal('unknown-bin', 'No place has this code. Check the label, or ask the coordinator to add it.', true)
  }
  if (operation.binCode && byCode?.id !== bin.id) {
    throw new Refusal('invalid-operation', 'binCode: it is the code of another place than binId', true)
  }
  return bin
}

async function otherEnd(
  db: Reader,
  operation: Extract<Operation, { type: 'transfer' }>,
  bin: BinRef,
): Promise<BinRef | null> {
  const other = await namedOtherEnd(db, operation, bin)
  if (other === 'no-place') return null
  if (!other)
    throw new Refusal('unknown-bin', 'The other end of this move is not known. Name its place or its room.', true)
  if (other.id === bin.id) throw new Refusal('invalid-operation', 'toBinId: a move needs two places', true)
  return other
}

async function namedOtherEnd(
  db: Reader,
  operation: Extract<Operation, { type: 'transfer' }>,
  bin: BinRef,
): Promise<BinRef | null | 'no-place'> {
  if (operation.toBinId) return findBin(db, { id: Number(operation.toBinId) })
  if (operation.toBinCode) return findBin(db, { code: foldShelfCode(operation.toBinCode) })
  const roomId = Number(operation.toRoomId ?? 0)
  if (!roomId || !(await roomExists(db, roomId))) return null
  const [now] = await listAssignments(db, bin.id)
  const itemId = operation.itemId ? Number(operation.itemId) : now?.itemId
  const found = itemId === undefined ? null : await findBinOfItemInRoom(db, roomId, itemId)
  return found ?? 'no-place'
}

/** The assignment an entry belongs to: the one the phone showed, even when the bin holds something else by now. */
async function endOf(
  db: Reader,
  bin: BinRef,
  itemId: number | null,
  at: Date,
): Promise<{ end: End; changed: boolean }> {
  const all = await listAssignments(db, bin.id)
  const current = all.find((a) => a.assignedTo === null) ?? null
  const then =
    all.find((a) => a.assignedFrom <= at && (a.assignedTo === null || a.assignedTo > at)) ?? current ?? all[0] ?? null
  const chosen =
    itemId === null ? then : current?.itemId === itemId ? current : (all.find((a) => a.itemId === itemId) ?? null)
  if (!chosen) {
    throw new Refusal(
      'item-mismatch',
      'This place does not hold that item. Look at its label and count it again.',
      true,
    )
  }
  return {
    end: {
      binId: bin.id,
      roomId: bin.roomId,
      assignmentId: chosen.id,
      itemId: chosen.itemId,
      packSize: chosen.packSize ?? 1,
    },
    changed: chosen.id !== current?.id,
  }
}

/** An order line is put away in its own place or in that place's overflow. */
async function checkLine(db: Reader, lineId: number, end: End, bin: BinRef): Promise<void> {
  const line = await findOrderLine(db, lineId)
  if (!line || line.state === 'draft') {
    throw new Refusal('invalid-operation', 'orderLineId: there is no such order on its way', false)
  }
  if (line.itemId !== end.itemId) throw new Refusal('item-mismatch', 'That order is for another item.', true)
  if (line.binId !== bin.id && line.binId !== bin.overflowOf) {
    throw new Refusal(
      'item-mismatch',
      'That order is for another place. Put it away there, or without the order.',
      true,
    )
  }
}

type AboutOther = Extract<Operation, { targetOpId: string }>

async function judgeAboutOther(
  db: Reader,
  actor: Actor,
  operation: AboutOther,
  statedAt: Date,
  receivedAt: Date,
  suspect: boolean,
): Promise<Judged> {
  if (operation.targetOpId === operation.opId)
    throw new Refusal('invalid-operation', 'targetOpId: an entry cannot be about itself', false)
  const targets = await listMovementsOfOps(db, [operation.targetOpId])
  const target = targets.find((t) => t.part === 0)
  if (!target && (await wasRefused(db, operation.targetOpId))) {
    throw new Refusal('target-refused', 'The entry this is about was not taken in. Settle that one first.', false)
  }
  if (!target) throw new NotYet('target-missing', 'The entry this is about has not arrived yet.')
  if (!targets.some((t) => scopeOf(actor, t.roomId)))
    throw new Refusal('out-of-scope', 'This place is outside your rooms.', false)
  await checkNamed(db, operation, targets)
  checkOwn(actor, operation, target, receivedAt)
  if (target.type === 'withdraw')
    throw new Refusal('invalid-operation', 'targetOpId: this was taken back already', false)
  const aboutCount = operation.type !== 'movement.withdraw'
  if (aboutCount !== (target.type === 'count')) {
    throw new Refusal('invalid-operation', `targetOpId: the entry it names is ${aboutCount ? 'no' : 'a'} count`, false)
  }
  const endOfRow = (row: MovementRow): End => ({
    binId: row.binId,
    roomId: row.roomId,
    assignmentId: row.assignmentId,
    itemId: row.itemId,
    packSize: 1,
  })
  const second = targets.find((t) => t.part === 1)
  return {
    operation,
    end: endOfRow(target),
    other: second ? endOfRow(second) : null,
    effectiveAt: target.effectiveAt,
    statedAt,
    flags: suspect ? ['clock-suspect'] : [],
    targetEnds: second ? ['bin', 'other'] : ['bin'],
    attention: null,
  }
}

/** A place that is named has to be one the target is about. */
async function checkNamed(db: Reader, operation: AboutOther, targets: MovementRow[]): Promise<void> {
  if (!operation.binId && !operation.binCode) return
  const bin = await binOf(db, operation)
  if (targets.some((t) => t.binId === bin.id)) return
  throw new Refusal('invalid-operation', 'binId: the entry it names is about another place', false)
}

/** Ward staff mend their own entries for one shift; a coordinator any, with a reason. */
function checkOwn(actor: Actor, operation: AboutOther, target: MovementRow, receivedAt: Date): void {
  const own = target.userId === actor.id && receivedAt.getTime() - target.recordedAt.getTime() <= ownHours * hourMs
  if (own) return
  if (actor.role !== 'coordinator') {
    throw new Refusal(
      'out-of-scope',
      'Only your own entries of this shift can be changed. Ask the coordinator, or count it again.',
      false,
    )
  }
  if (!operation.reason)
    throw new Refusal('invalid-operation', 'reason: say why somebody else’s entry is changed', true)
}
