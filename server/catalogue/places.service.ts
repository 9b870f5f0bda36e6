import type { Room, Supplier, Ward } from '#shared/contracts/catalogue.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { groupBy, momentOf, viewBins } from '../counts/bin-view.service.ts'
import { startRoom, touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import { isDuplicate } from '../db/errors.ts'
import type { Actor } from '../http/context.ts'
import { checkCalendar } from './calendars.service.ts'
import { readHospital } from './hospital.service.ts'
import { liveBinsOfSuppliers } from './items.repository.ts'
import * as repo from './places.repository.ts'
import { checkReach } from './reach.service.ts'

export interface ListQuery {
  page: number
  pageSize: number
  q?: string
  retired: 'yes' | 'no'
}

export const listFilter = (query: ListQuery): repo.ListFilter => ({
  q: query.q || undefined,
  retired: query.retired === 'yes',
  offset: (query.page - 1) * query.pageSize,
  limit: query.pageSize,
})

export const listAnswer = <T>(items: T[], total: number, query: ListQuery) => ({
  items,
  total,
  page: query.page,
  pageSize: query.pageSize,
})

/** Only what was given; `retired` becomes its moment. */
export function changeOf<T extends { retired?: boolean }>(
  input: T,
  now: Date,
): Omit<T, 'retired'> & { retiredAt?: Date | null } {
  const { retired, ...rest } = input
  const set = Object.fromEntries(Object.entries(rest).filter(([, v]) => v !== undefined)) as Omit<T, 'retired'>
  return retired === undefined ? set : { ...set, retiredAt: retired ? now : null }
}

/** A code somebody else has: said at its field. */
export function codeTakenProblem(error: unknown): never {
  if (isDuplicate(error)) throw fieldProblem('/code', 'another one has this code')
  throw error
}

/** A named calendar as its row's id; nothing where none was given. */
const calendarOfInput = async (db: Reader, input: { calendarId?: string | null }) =>
  input.calendarId === undefined ? {} : { calendarId: await checkCalendar(db, input.calendarId) }

// Wards -----------------------------------------------------------------------------------------------------------
const toWard = (row: repo.WardRow): Ward => ({
  id: String(row.id),
  code: row.code,
  name: row.name,
  kind: row.kind,
  site: row.site,
  calendarId: row.calendarId === null ? null : String(row.calendarId),
  retired: row.retiredAt !== null,
})

export async function listWards(db: Reader, query: ListQuery) {
  const { rows, total } = await repo.listWardRows(db, listFilter(query))
  return listAnswer(rows.map(toWard), total, query)
}

export async function createWard(
  tx: Tx,
  clock: Clock,
  actorId: number,
  input: Omit<Ward, 'id' | 'retired'>,
): Promise<Ward> {
  const calendarId = await checkCalendar(tx, input.calendarId)
  const id = await repo.insertWard(tx, { ...input, calendarId, retiredAt: null }).catch(codeTakenProblem)
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'ward-added',
    subject: 'ward',
    subjectId: id,
    after: input,
  })
  return toWard((await repo.findWard(tx, id))!)
}

export async function updateWard(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Partial<Omit<Ward, 'id'>>,
): Promise<Ward> {
  const before = await repo.findWard(tx, id)
  if (!before) throw problem('not-found')
  if (input.retired && (await repo.liveRoomsOfWard(tx, id)).length) {
    throw problem('in-use', 'This ward still has rooms. Retire or move them first.')
  }
  const { calendarId: _named, ...rest } = input
  const set = { ...changeOf(rest, clock.now()), ...(await calendarOfInput(tx, input)) }
  await repo.updateWardRow(tx, id, set).catch(codeTakenProblem)
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'ward-changed',
    subject: 'ward',
    subjectId: id,
    before,
    after: input,
  })
  const after = (await repo.findWard(tx, id))!
  if (after.calendarId !== before.calendarId) {
    await checkReach(tx, clock.now(), '/calendarId')
    await touchBins(tx, clock.now(), await repo.liveBinsOfWards(tx, [id]), 'calendar')
  }
  return toWard(after)
}

// Rooms -----------------------------------------------------------------------------------------------------------
const toRoom = (row: repo.RoomRow, bins: number, below: number): Room => ({
  id: String(row.id),
  code: row.code,
  name: row.name,
  wardId: String(row.wardId),
  wardName: row.wardName,
  wardKind: row.wardKind,
  countEveryDays: row.countEveryDays,
  countDays: row.countDays,
  mode: row.mode,
  bins,
  below,
  retired: row.retiredAt !== null,
})

export async function listRooms(db: Reader, clock: Clock, actor: Actor, query: ListQuery) {
  const { rows, total } = await repo.listRoomRows(db, { ...listFilter(query), roomIds: actor.roomIds })
  const { timeZone } = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, timeZone), { roomIds: rows.map((r) => r.id), retired: false })
  const byRoom = groupBy(views, (v) => v.row.roomId)
  const items = rows.map((row) => {
    const own = byRoom.get(row.id) ?? []
    return toRoom(row, own.length, own.filter((v) => v.bin.states.includes('below')).length)
  })
  return listAnswer(items, total, query)
}

export async function oneRoom(db: Reader, clock: Clock, id: number): Promise<Room> {
  const row = await repo.findRoom(db, id)
  if (!row) throw problem('not-found')
  const { timeZone } = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, timeZone), { roomIds: null, roomId: id, retired: false })
  return toRoom(row, views.length, views.filter((v) => v.bin.states.includes('below')).length)
}

interface RoomFields {
  code: string
  name: string
  wardId: string
  countEveryDays: number
  countDays: string
  mode: Room['mode']
}

async function checkWard(db: Reader, wardId: string): Promise<number> {
  const ward = await repo.findWard(db, Number(wardId))
  if (!ward || ward.retiredAt) throw fieldProblem('/wardId', 'choose a ward that is in use')
  return ward.id
}

export async function createRoom(tx: Tx, clock: Clock, actorId: number, input: RoomFields): Promise<Room> {
  const wardId = await checkWard(tx, input.wardId)
  const id = await repo.insertRoom(tx, { ...input, wardId, retiredAt: null }).catch(codeTakenProblem)
  await startRoom(tx, id)
  if (input.countDays) await checkReach(tx, clock.now(), '/countDays')
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'room-added',
    subject: 'room',
    subjectId: id,
    after: input,
  })
  return oneRoom(tx, clock, id)
}

export async function updateRoom(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Partial<RoomFields> & { retired?: boolean },
): Promise<Room> {
  const before = await repo.findRoom(tx, id)
  if (!before) throw problem('not-found')
  const bins = await repo.liveBinsOfRoom(tx, id)
  if (input.retired && bins.length) throw problem('in-use', 'This room still has places. Retire or move them first.')
  const { wardId, ...rest } = input
  const set = {
    ...changeOf(rest, clock.now()),
    ...(wardId === undefined ? {} : { wardId: await checkWard(tx, wardId) }),
  }
  await repo.updateRoomRow(tx, id, set).catch(codeTakenProblem)
  if (input.countDays || wardId) await checkReach(tx, clock.now(), input.countDays ? '/countDays' : '/wardId')
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'room-changed',
    subject: 'room',
    subjectId: id,
    before,
    after: input,
  })
  if (input.mode !== undefined && input.mode !== before.mode) await touchForMode(tx, clock.now(), actor, id)
  const rhythm = input.countEveryDays !== undefined || input.countDays !== undefined || wardId !== undefined
  await touchBins(tx, clock.now(), bins, rhythm ? 'rhythm' : null)
  return oneRoom(tx, clock, id)
}

/** A room is kept another way: for its vital items that is a yes only when the reviewer says it. */
export async function touchForMode(tx: Tx, now: Date, actor: Pick<Actor, 'role'>, roomId: number): Promise<void> {
  const vital = await repo.vitalBinsOfRoom(tx, roomId)
  const others = (await repo.liveBinsOfRoom(tx, roomId)).filter((binId) => !vital.includes(binId))
  await touchBins(tx, now, others, 'mode')
  await touchBins(tx, now, vital, actor.role === 'reviewer' ? 'mode' : 'mode-vital')
}

// Suppliers -------------------------------------------------------------------------------------------------------
export type SupplierFields = Omit<Supplier, 'id' | 'retired' | 'seen'>

async function toSuppliers(db: Reader, rows: repo.SupplierRow[]): Promise<Supplier[]> {
  const seen = new Map(
    (
      await repo.listSeen(
        db,
        rows.map((r) => r.id),
      )
    ).map((s) => [s.supplierId, s]),
  )
  return rows.map(({ retiredAt, id, calendarId, ...row }) => ({
    ...row,
    id: String(id),
    calendarId: calendarId === null ? null : String(calendarId),
    seen: { deliveries: seen.get(id)?.deliveries ?? 0, delayDays: seen.get(id)?.delayDays ?? null },
    retired: retiredAt !== null,
  }))
}

async function oneSupplier(db: Reader, id: number): Promise<Supplier> {
  const [supplier] = await toSuppliers(db, [(await repo.findSupplier(db, id))!])
  return supplier!
}

export async function listSuppliers(db: Reader, query: ListQuery) {
  const { rows, total } = await repo.listSupplierRows(db, listFilter(query))
  return listAnswer(await toSuppliers(db, rows), total, query)
}

export async function createSupplier(tx: Tx, clock: Clock, actorId: number, input: SupplierFields): Promise<Supplier> {
  const calendarId = await checkCalendar(tx, input.calendarId)
  const id = await repo.insertSupplier(tx, { ...input, calendarId, retiredAt: null }).catch(codeTakenProblem)
  await checkReach(tx, clock.now(), calendarId === null ? '/orderDays' : '/calendarId')
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'supplier-added',
    subject: 'supplier',
    subjectId: id,
    after: input,
  })
  return oneSupplier(tx, id)
}

/** What decides on which days it can be ordered from. */
const timesOf = ['calendarId', 'orderDays', 'cutOff', 'arrivalDays', 'arrivalTime', 'leadWorkingDays'] as const

export async function updateSupplier(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Partial<SupplierFields> & { retired?: boolean },
): Promise<Supplier> {
  const before = await repo.findSupplier(tx, id)
  if (!before) throw problem('not-found')
  const bins = await liveBinsOfSuppliers(tx, [id])
  if (input.retired && bins.length)
    throw problem('in-use', 'Items in use still come from this supplier. Give them another one first.')
  const { calendarId: _named, ...rest } = input
  const set = { ...changeOf(rest, clock.now()), ...(await calendarOfInput(tx, input)) }
  await repo.updateSupplierRow(tx, id, set).catch(codeTakenProblem)
  if (timesOf.some((field) => input[field] !== undefined))
    await checkReach(tx, clock.now(), input.calendarId ? '/calendarId' : '/orderDays')
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'supplier-changed',
    subject: 'supplier',
    subjectId: id,
    before,
    after: input,
  })
  await touchBins(tx, clock.now(), bins, 'calendar')
  return oneSupplier(tx, id)
}

/** One supplier as stored, for those who compute calendars or send orders. */
export const supplierRow = repo.findSupplier
