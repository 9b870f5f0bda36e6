import type { Bin } from '#shared/contracts/bins.ts'
import type { RoomLevelRow, RoomLevels } from '#shared/contracts/room-levels.ts'
import { problem } from '#shared/contracts/problems.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { currentPolicy, isComputed } from '../policy/policy.service.ts'
import { readHospital } from './hospital.service.ts'
import { oneRoom, touchForMode } from './places.service.ts'
import { updateRoomRow } from './places.repository.ts'

const shown = 10

/** Entered and worked-out levels of a room side by side; what would move if it were kept by what is worked out. */
export async function readRoomLevels(db: Reader, clock: Clock, actor: Actor, id: number): Promise<RoomLevels> {
  if (actor.roomIds !== null && !actor.roomIds.includes(id)) throw problem('not-found')
  const room = await oneRoom(db, clock, id)
  const { timeZone } = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, timeZone), { roomIds: null, roomId: id, retired: false })
  const rows: RoomLevelRow[] = []
  let without = 0
  for (const view of views.filter(isComputed)) {
    const calculated = await calculatedLevel(db, view)
    if (calculated === null) without += 1
    else rows.push(levelRow(view.bin, calculated))
  }
  const compared = rows.filter((row) => row.entered !== null)
  return {
    room,
    rows: rows.sort(byDifference).slice(0, shown),
    places: rows.length,
    rise: compared.filter((row) => row.difference > 0).length,
    fall: compared.filter((row) => row.difference < 0).length,
    vital: rows.filter((row) => row.waitsForReviewer).length,
    entered: without,
  }
}

async function calculatedLevel(db: Reader, view: BinView): Promise<number | null> {
  const policy = await currentPolicy(db, view.row.id)
  if (policy?.assignmentId !== view.row.assignmentId) return null
  return (policy?.result as PolicyResult | null)?.reorderPoint ?? null
}

function levelRow(bin: Bin, calculated: number): RoomLevelRow {
  const entered = bin.enteredReorderPoint
  return {
    bin,
    entered,
    calculated,
    difference: calculated - (entered ?? calculated),
    waitsForReviewer: bin.item?.ved === 'V' && entered !== null && calculated < entered && !isAgreed(bin),
  }
}

/** A figure in force below what was entered: the reviewer has said yes to less. */
const isAgreed = (bin: Bin): boolean =>
  bin.reorderPoint !== null && bin.enteredReorderPoint !== null && bin.reorderPoint < bin.enteredReorderPoint

const share = (row: RoomLevelRow): number => Math.abs(row.difference) / Math.max(1, row.entered ?? 1)
const byDifference = (a: RoomLevelRow, b: RoomLevelRow): number =>
  share(b) - share(a) || a.bin.walkOrder - b.bin.walkOrder || Number(a.bin.id) - Number(b.bin.id)

/**
 * Keeps a room another way. A vital item's level goes below what was entered only with the reviewer's yes, which is
 * their own call of this, also for a room that is kept that way already.
 */
export async function setRoomMode(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: { mode: RoomLevels['room']['mode']; reason: string },
): Promise<RoomLevels> {
  const before = await readRoomLevels(tx, clock, actor, id)
  if (before.room.retired) throw problem('not-found')
  const isNew = before.room.mode !== input.mode
  if (!isNew && actor.role !== 'reviewer') return before
  await updateRoomRow(tx, id, { mode: input.mode })
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'room-mode-set',
    subject: 'room',
    subjectId: id,
    before: { mode: before.room.mode },
    after: { mode: input.mode },
    reason: input.reason || null,
  })
  await touchForMode(tx, clock.now(), actor, id)
  return readRoomLevels(tx, clock, actor, id)
}
