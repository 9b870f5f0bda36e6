import { randomBytes } from 'node:crypto'
import type { Bin } from '#shared/contracts/bins.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { makeShelfCode, parseShelfCode } from '#shared/barcode/shelf-code.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins } from '../counts/bin-view.service.ts'
import { leaveRoom, startLevel, takeAssignment, touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { recompute } from '../policy/policy.service.ts'
import * as repo from './bins.repository.ts'
import { readHospital } from './hospital.service.ts'
import { findItem } from './items.repository.ts'
import { findRoom } from './places.repository.ts'

export interface BinFields {
  roomId: string
  bay: string
  shelf: string
  walkOrder?: number
  kind: Bin['kind']
  overflowOf: string | null
  itemId: string | null
  capacity: number | null
  enteredReorderPoint: number | null
  enteredPar: number | null
}

/** A code no bin ever had. */
async function freshCode(db: Reader): Promise<string> {
  for (;;) {
    const made = makeShelfCode((n) => new Uint8Array(randomBytes(n)))
    if (!(await repo.codeTaken(db, made))) return made
  }
}

async function givenCode(db: Reader, text: string): Promise<string> {
  const read = parseShelfCode(text)
  if (!read.ok)
    throw fieldProblem('/code', 'this is no label code: check each character, or leave it empty for a new one')
  if (await repo.codeTaken(db, read.code))
    throw fieldProblem('/code', 'another place has this label; a code is never used twice')
  return read.code
}

async function checkRoom(db: Reader, actor: Scoped, roomId: string): Promise<number> {
  const room = await findRoom(db, Number(roomId))
  const inScope = actor.roomIds === null || actor.roomIds.includes(Number(roomId))
  if (!room || room.retiredAt || !inScope) throw fieldProblem('/roomId', 'choose a room that is in use')
  return room.id
}

/** Places named beside what they may do. */
type Scoped = Pick<Actor, 'id' | 'roomIds'>

/** A level to fill up to below the level to order at would never be reached. */
function checkLevels(levels: Levels): void {
  if (
    levels.enteredPar !== null &&
    levels.enteredReorderPoint !== null &&
    levels.enteredPar < levels.enteredReorderPoint
  ) {
    throw fieldProblem('/enteredPar', 'fill up to at least the reorder point')
  }
}

async function checkItem(db: Reader, itemId: string | null): Promise<number | null> {
  if (itemId === null) return null
  const row = await findItem(db, Number(itemId))
  if (!row || row.item.retiredAt) throw fieldProblem('/itemId', 'choose an item that is in use')
  return row.item.id
}

/** An overflow place belongs to one main place of the same item in the same room. */
async function checkOverflow(
  db: Reader,
  own: number | null,
  overflowOf: string | null,
  roomId: number,
  itemId: number | null,
): Promise<number | null> {
  if (overflowOf === null) return null
  const main = await repo.findBinRecord(db, Number(overflowOf))
  if (!main || main.retiredAt || main.id === own)
    throw fieldProblem('/overflowOf', 'choose another place that is in use')
  if (main.overflowOf !== null)
    throw fieldProblem('/overflowOf', 'that place is itself an overflow; choose its main place')
  if (main.roomId !== roomId) throw fieldProblem('/overflowOf', 'the main place has to be in the same room')
  const assigned = await repo.findAssignment(db, main.id)
  if (assigned?.itemId !== itemId) throw fieldProblem('/overflowOf', 'the main place has to hold the same item')
  if (own !== null && (await repo.liveOverflowOf(db, own)).length)
    throw fieldProblem('/overflowOf', 'this place has overflow places of its own')
  return main.id
}

async function oneBin(db: Reader, clock: Clock, id: number): Promise<Bin> {
  const { timeZone } = await readHospital(db)
  const [view] = await viewBins(db, momentOf(clock, timeZone), { roomIds: null, binIds: [id], retired: false })
  return view!.bin
}

export async function createBin(
  tx: Tx,
  clock: Clock,
  actor: Scoped,
  input: BinFields & { code?: string },
): Promise<Bin> {
  const now = clock.now()
  const roomId = await checkRoom(tx, actor, input.roomId)
  const itemId = await checkItem(tx, input.itemId)
  checkLevels(input)
  const overflowOf = await checkOverflow(tx, null, input.overflowOf, roomId, itemId)
  const code = input.code ? await givenCode(tx, input.code) : await freshCode(tx)
  const walkOrder = input.walkOrder ?? (await repo.lastWalkOrder(tx, roomId)) + 10
  const id = await repo.insertBin(tx, {
    code,
    kind: input.kind,
    overflowOf,
    roomId,
    bay: input.bay,
    shelf: input.shelf,
    walkOrder,
    retiredAt: null,
  })
  await startLevel(tx, id, roomId)
  if (itemId !== null) await assign(tx, now, id, itemId, input)
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'bin-added',
    subject: 'bin',
    subjectId: id,
    after: { ...input, code },
  })
  await touchBins(tx, now, [id], null)
  await recompute(tx, clock, id, 'entered')
  return oneBin(tx, clock, id)
}

type Levels = Pick<BinFields, 'capacity' | 'enteredReorderPoint' | 'enteredPar'>

/** From now on the place holds this item: levels, demand and orders begin anew. */
async function assign(tx: Tx, now: Date, binId: number, itemId: number, levels: Levels): Promise<void> {
  const assignmentId = await repo.insertAssignment(tx, {
    binId,
    itemId,
    assignedFrom: now,
    assignedTo: null,
    enteredPar: levels.enteredPar,
    enteredReorderPoint: levels.enteredReorderPoint,
    capacity: levels.capacity,
  })
  await takeAssignment(tx, now, binId, assignmentId)
}

export async function updateBin(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Partial<BinFields> & { retired?: boolean },
): Promise<Bin> {
  const bin = await repo.lockBin(tx, id)
  if (!bin || (actor.roomIds !== null && !actor.roomIds.includes(bin.roomId))) throw problem('not-found')
  const now = clock.now()
  const assigned = await repo.findAssignment(tx, id)
  const before = { ...bin, assigned }
  const itemId = input.itemId === undefined ? (assigned?.itemId ?? null) : await checkItem(tx, input.itemId)
  const roomId = input.roomId === undefined ? bin.roomId : await checkRoom(tx, actor, input.roomId)
  const leaves = itemId !== (assigned?.itemId ?? null) || roomId !== bin.roomId
  if (leaves && (await repo.liveOverflowOf(tx, id)).length) {
    throw problem('in-use', 'Overflow places belong to this one. Retire them, or give them their own item, first.')
  }
  if (input.retired && (await repo.liveOverflowOf(tx, id)).length)
    throw problem('in-use', 'Overflow places belong to this one. Retire or move them first.')
  const overflow =
    input.overflowOf === undefined ? (bin.overflowOf === null ? null : String(bin.overflowOf)) : input.overflowOf
  const overflowOf = input.retired ? bin.overflowOf : await checkOverflow(tx, id, overflow, roomId, itemId)
  await repo.updateBinRow(tx, id, {
    kind: input.kind ?? bin.kind,
    bay: input.bay ?? bin.bay,
    shelf: input.shelf ?? bin.shelf,
    walkOrder: input.walkOrder ?? bin.walkOrder,
    roomId,
    overflowOf,
    ...(input.retired === undefined ? {} : { retiredAt: input.retired ? now : null }),
  })
  await applyAssignment(tx, now, id, assigned, itemId, input)
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'bin-changed',
    subject: 'bin',
    subjectId: id,
    before,
    after: input,
  })
  if (roomId !== bin.roomId || input.retired) await leaveRoom(tx, id, bin.roomId, roomId)
  await touchBins(tx, now, [id, ...(overflowOf === null ? [] : [overflowOf])], null)
  await recompute(tx, clock, id, 'entered')
  // A place that is no overflow any more leaves its main place with its own use again.
  if (bin.overflowOf !== null && bin.overflowOf !== overflowOf) await recompute(tx, clock, bin.overflowOf, 'entered')
  return oneBin(tx, clock, id)
}

async function applyAssignment(
  tx: Tx,
  now: Date,
  binId: number,
  assigned: repo.AssignmentRecord | null,
  itemId: number | null,
  input: Partial<BinFields>,
): Promise<void> {
  const levels: Levels = {
    capacity: input.capacity === undefined ? (assigned?.capacity ?? null) : input.capacity,
    enteredReorderPoint:
      input.enteredReorderPoint === undefined ? (assigned?.enteredReorderPoint ?? null) : input.enteredReorderPoint,
    enteredPar: input.enteredPar === undefined ? (assigned?.enteredPar ?? null) : input.enteredPar,
  }
  checkLevels(levels)
  if (itemId === (assigned?.itemId ?? null)) {
    if (assigned) await repo.updateAssignment(tx, assigned.id, levels)
    return
  }
  if (assigned) await repo.endAssignment(tx, assigned.id, now)
  if (itemId === null) await takeAssignment(tx, now, binId, null)
  else await assign(tx, now, binId, itemId, levels)
}
