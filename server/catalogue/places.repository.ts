import { and, asc, avg, count, eq, inArray, isNotNull, isNull, like, min, or, sql, type SQL } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { leadTimeObservations } from '../policy/policy.tables.ts'
import { binAssignments, bins, hospitals, items, rooms, suppliers, wards } from './catalogue.tables.ts'

export interface ListFilter {
  q?: string
  retired: boolean
  offset: number
  limit: number
}

const pattern = (q: string): string => `%${q.replace(/[\\%_]/g, '\\$&')}%`

// Wards -----------------------------------------------------------------------------------------------------------
export type WardRow = typeof wards.$inferSelect

export async function listWardRows(db: Reader, filter: ListFilter): Promise<{ rows: WardRow[]; total: number }> {
  const where = and(
    filter.retired ? isNotNull(wards.retiredAt) : isNull(wards.retiredAt),
    filter.q ? or(like(wards.name, pattern(filter.q)), like(wards.code, pattern(filter.q))) : undefined,
  )
  const rows = await db
    .select()
    .from(wards)
    .where(where)
    .orderBy(asc(wards.name), asc(wards.id))
    .limit(filter.limit)
    .offset(filter.offset)
  const [total] = await db.select({ n: count() }).from(wards).where(where)
  return { rows, total: total?.n ?? 0 }
}

export async function findWard(db: Reader, id: number): Promise<WardRow | null> {
  const [row] = await db.select().from(wards).where(eq(wards.id, id))
  return row ?? null
}

export async function insertWard(tx: Tx, row: typeof wards.$inferInsert): Promise<number> {
  const [made] = await tx.insert(wards).values(row).$returningId()
  return made!.id
}

export async function updateWardRow(tx: Tx, id: number, set: Partial<WardRow>): Promise<void> {
  if (Object.keys(set).length) await tx.update(wards).set(set).where(eq(wards.id, id))
}

// Rooms -----------------------------------------------------------------------------------------------------------
const roomColumns = {
  id: rooms.id,
  code: rooms.code,
  name: rooms.name,
  wardId: rooms.wardId,
  countEveryDays: rooms.countEveryDays,
  countDays: rooms.countDays,
  mode: rooms.mode,
  retiredAt: rooms.retiredAt,
  wardName: wards.name,
  wardKind: wards.kind,
}
const roomBase = (db: Reader) => db.select(roomColumns).from(rooms).innerJoin(wards, eq(wards.id, rooms.wardId))
export type RoomRow = Awaited<ReturnType<typeof roomBase>>[number]

export async function listRoomRows(
  db: Reader,
  filter: ListFilter & { roomIds: number[] | null },
): Promise<{ rows: RoomRow[]; total: number }> {
  const parts: (SQL | undefined)[] = [filter.retired ? isNotNull(rooms.retiredAt) : isNull(rooms.retiredAt)]
  if (filter.roomIds) parts.push(filter.roomIds.length ? inArray(rooms.id, filter.roomIds) : sql`FALSE`)
  if (filter.q)
    parts.push(
      or(like(rooms.name, pattern(filter.q)), like(rooms.code, pattern(filter.q)), like(wards.name, pattern(filter.q))),
    )
  const where = and(...parts)
  const rows = await roomBase(db)
    .where(where)
    .orderBy(asc(wards.name), asc(rooms.name), asc(rooms.id))
    .limit(filter.limit)
    .offset(filter.offset)
  const [total] = await db.select({ n: count() }).from(rooms).innerJoin(wards, eq(wards.id, rooms.wardId)).where(where)
  return { rows, total: total?.n ?? 0 }
}

export async function findRoom(db: Reader, id: number): Promise<RoomRow | null> {
  const [row] = await roomBase(db).where(eq(rooms.id, id))
  return row ?? null
}

export async function insertRoom(tx: Tx, row: typeof rooms.$inferInsert): Promise<number> {
  const [made] = await tx.insert(rooms).values(row).$returningId()
  return made!.id
}

export async function updateRoomRow(tx: Tx, id: number, set: Partial<typeof rooms.$inferInsert>): Promise<void> {
  if (Object.keys(set).length) await tx.update(rooms).set(set).where(eq(rooms.id, id))
}

export async function liveBinsOfRoom(db: Reader, roomId: number): Promise<number[]> {
  const rows = await db
    .select({ id: bins.id })
    .from(bins)
    .where(and(eq(bins.roomId, roomId), isNull(bins.retiredAt)))
  return rows.map((r) => r.id)
}

export async function vitalBinsOfRoom(db: Reader, roomId: number): Promise<number[]> {
  const rows = await db
    .select({ id: bins.id })
    .from(bins)
    .innerJoin(binAssignments, and(eq(binAssignments.binId, bins.id), isNull(binAssignments.assignedTo)))
    .innerJoin(items, eq(items.id, binAssignments.itemId))
    .where(and(eq(bins.roomId, roomId), isNull(bins.retiredAt), eq(items.ved, 'V')))
  return rows.map((r) => r.id)
}

export async function liveBinsOfWards(db: Reader, wardIds: number[]): Promise<number[]> {
  if (wardIds.length === 0) return []
  const rows = await db
    .select({ id: bins.id })
    .from(bins)
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .where(and(inArray(rooms.wardId, wardIds), isNull(bins.retiredAt)))
  return rows.map((r) => r.id)
}

export async function liveRoomsOfWard(db: Reader, wardId: number): Promise<number[]> {
  const rows = await db
    .select({ id: rooms.id })
    .from(rooms)
    .where(and(eq(rooms.wardId, wardId), isNull(rooms.retiredAt)))
  return rows.map((r) => r.id)
}

// Suppliers -------------------------------------------------------------------------------------------------------
export type SupplierRow = typeof suppliers.$inferSelect

export async function listSupplierRows(
  db: Reader,
  filter: ListFilter,
): Promise<{ rows: SupplierRow[]; total: number }> {
  const where = and(
    filter.retired ? isNotNull(suppliers.retiredAt) : isNull(suppliers.retiredAt),
    filter.q ? or(like(suppliers.name, pattern(filter.q)), like(suppliers.code, pattern(filter.q))) : undefined,
  )
  const rows = await db
    .select()
    .from(suppliers)
    .where(where)
    .orderBy(asc(suppliers.name), asc(suppliers.id))
    .limit(filter.limit)
    .offset(filter.offset)
  const [total] = await db.select({ n: count() }).from(suppliers).where(where)
  return { rows, total: total?.n ?? 0 }
}

export async function findSupplier(db: Reader, id: number): Promise<SupplierRow | null> {
  const [row] = await db.select().from(suppliers).where(eq(suppliers.id, id))
  return row ?? null
}

/** Deliveries whose time was seen, and the mean delay of what they brought beyond the stated time. */
export async function listSeen(db: Reader, supplierIds: number[]) {
  if (supplierIds.length === 0) return []
  return db
    .select({
      supplierId: leadTimeObservations.supplierId,
      deliveries:
        sql<number>`count(distinct ${leadTimeObservations.orderedAt}, ${leadTimeObservations.arrivedAt})`.mapWith(
          Number,
        ),
      delayDays: avg(leadTimeObservations.delayDays).mapWith(Number),
    })
    .from(leadTimeObservations)
    .where(inArray(leadTimeObservations.supplierId, supplierIds))
    .groupBy(leadTimeObservations.supplierId)
}

export async function insertSupplier(tx: Tx, row: typeof suppliers.$inferInsert): Promise<number> {
  const [made] = await tx.insert(suppliers).values(row).$returningId()
  return made!.id
}

export async function updateSupplierRow(tx: Tx, id: number, set: Partial<SupplierRow>): Promise<void> {
  if (Object.keys(set).length) await tx.update(suppliers).set(set).where(eq(suppliers.id, id))
}

// Calendars -------------------------------------------------------------------------------------------------------
/** Everybody in use who goes by closed days: suppliers, and each kind of room by its ward's calendar and counting days. */
export async function listReach(db: Reader) {
  const [hospital] = await db.select({ timeZone: hospitals.timeZone }).from(hospitals).where(eq(hospitals.id, 1))
  return {
    timeZone: hospital?.timeZone ?? 'utc',
    suppliers: await db.select().from(suppliers).where(isNull(suppliers.retiredAt)),
    places: await db
      .select({
        wardCalendarId: wards.calendarId,
        countDays: rooms.countDays,
        roomName: min(rooms.name).mapWith(String),
      })
      .from(rooms)
      .innerJoin(wards, eq(wards.id, rooms.wardId))
      .where(isNull(rooms.retiredAt))
      .groupBy(wards.calendarId, rooms.countDays),
  }
}
