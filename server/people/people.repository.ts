import { and, asc, count, eq, gt, inArray, isNotNull, isNull, like, lt, ne, or, sql, type SQL } from 'drizzle-orm'
import { rooms } from '../catalogue/catalogue.tables.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import type { Role } from '#shared/contracts/contract.ts'
import { passwordResets, personNames, sessions, signInAttempts, userRooms, users } from './people.tables.ts'

export interface Person {
  id: number
  name: string
  email: string
  staffCode: string
  role: Role
  passwordHash: string
  isAllRooms: boolean
  authzVersion: number
  retiredAt: Date | null
  roomIds: number[] | null
}

const columns = {
  id: users.id,
  name: personNames.name,
  email: users.email,
  staffCode: users.staffCode,
  role: users.role,
  passwordHash: users.passwordHash,
  isAllRooms: users.isAllRooms,
  authzVersion: users.authzVersion,
  retiredAt: users.retiredAt,
}

const base = (db: Reader) => db.select(columns).from(users).leftJoin(personNames, eq(personNames.userId, users.id))

type Row = Awaited<ReturnType<typeof base>>[number]

async function withRooms(db: Reader, rows: Row[]): Promise<Person[]> {
  const scoped = rows.filter((r) => !r.isAllRooms).map((r) => r.id)
  const own = scoped.length ? await db.select().from(userRooms).where(inArray(userRooms.userId, scoped)) : []
  return rows.map((row) => ({
    ...row,
    name: row.name ?? 'Former colleague',
    roomIds: row.isAllRooms ? null : own.filter((r) => r.userId === row.id).map((r) => r.roomId),
  }))
}

export async function findPerson(db: Reader, id: number): Promise<Person | null> {
  return (await withRooms(db, await base(db).where(eq(users.id, id))))[0] ?? null
}

export async function findPersonBySignIn(
  db: Reader,
  by: { email?: string; staffCode?: string },
): Promise<Person | null> {
  const where = by.email ? eq(users.email, by.email.toLowerCase()) : eq(users.staffCode, by.staffCode ?? '')
  return (await withRooms(db, await base(db).where(where)))[0] ?? null
}

export async function listPeople(
  db: Reader,
  filter: { q?: string; retired: boolean; offset: number; limit: number },
): Promise<{ rows: Person[]; total: number }> {
  const where: SQL[] = [filter.retired ? isNotNull(users.retiredAt) : isNull(users.retiredAt)]
  if (filter.q) {
    const pattern = `%${filter.q.replace(/[\\%_]/g, '\\$&')}%`
    where.push(or(like(personNames.name, pattern), like(users.email, pattern), like(users.staffCode, pattern))!)
  }
  const rows = await base(db)
    .where(and(...where))
    .orderBy(asc(personNames.name), asc(users.id))
    .limit(filter.limit)
    .offset(filter.offset)
  const [total] = await db
    .select({ n: count() })
    .from(users)
    .leftJoin(personNames, eq(personNames.userId, users.id))
    .where(and(...where))
  return { rows: await withRooms(db, rows), total: total?.n ?? 0 }
}

/** Names by id, for screens that may show them. */
export async function namesOf(db: Reader, ids: number[]): Promise<Map<number, { name: string; role: Role }>> {
  if (ids.length === 0) return new Map()
  const rows = await base(db).where(inArray(users.id, [...new Set(ids)]))
  return new Map(rows.map((r) => [r.id, { name: r.name ?? 'Former colleague', role: r.role }]))
}

/** Rooms among the given ids that exist. */
export async function existingRooms(db: Reader, ids: number[]): Promise<Set<number>> {
  if (ids.length === 0) return new Set()
  const rows = await db.select({ id: rooms.id }).from(rooms).where(inArray(rooms.id, ids))
  return new Set(rows.map((r) => r.id))
}

export interface NewPerson {
  name: string
  email: string
  staffCode: string
  role: Role
  passwordHash: string
  roomIds: number[] | null
  createdAt: Date
}

export async function insertPerson(tx: Tx, person: NewPerson): Promise<number> {
  const [made] = await tx
    .insert(users)
    .values({
      email: person.email.toLowerCase(),
      staffCode: person.staffCode,
      role: person.role,
      passwordHash: person.passwordHash,
      isAllRooms: person.roomIds === null,
      createdAt: person.createdAt,
    })
    .$returningId()
  const id = made!.id
  await tx.insert(personNames).values({ userId: id, name: person.name })
  await setRooms(tx, id, person.roomIds)
  return id
}

async function setRooms(tx: Tx, userId: number, roomIds: number[] | null): Promise<void> {
  await tx.delete(userRooms).where(eq(userRooms.userId, userId))
  const rows = [...new Set(roomIds ?? [])].map((roomId) => ({ userId, roomId }))
  if (rows.length) await tx.insert(userRooms).values(rows)
}

export interface PersonChange {
  name?: string
  email?: string
  staffCode?: string
  role?: Role
  passwordHash?: string
  roomIds?: number[] | null
  retiredAt?: Date | null
  raiseAuthz?: boolean
}

export async function updatePerson(tx: Tx, id: number, change: PersonChange): Promise<void> {
  const { name, roomIds, raiseAuthz, email, ...rest } = change
  const set = {
    ...rest,
    ...(email === undefined ? {} : { email: email.toLowerCase() }),
    ...(roomIds === undefined ? {} : { isAllRooms: roomIds === null }),
    ...(raiseAuthz ? { authzVersion: sql`${users.authzVersion} + 1` } : {}),
  }
  if (Object.keys(set).length) await tx.update(users).set(set).where(eq(users.id, id))
  if (name !== undefined) {
    await tx.insert(personNames).values({ userId: id, name }).onDuplicateKeyUpdate({ set: { name } })
  }
  if (roomIds !== undefined) await setRooms(tx, id, roomIds)
}

export async function deleteSessionsOf(tx: Tx, userId: number, exceptSid: string | null): Promise<void> {
  await tx
    .delete(sessions)
    .where(exceptSid ? and(eq(sessions.userId, userId), ne(sessions.sid, exceptSid)) : eq(sessions.userId, userId))
}

export async function deleteExpired(db: Reader, before: Date, attemptsBefore: Date): Promise<void> {
  await db.delete(sessions).where(lt(sessions.expiresAt, before))
  await db.delete(signInAttempts).where(lt(signInAttempts.failedAt, attemptsBefore))
}

export async function countFailures(
  db: Reader,
  by: { accountKey?: string; addressKey?: string },
  since: Date,
): Promise<{ n: number; oldest: Date | null }> {
  const key = by.accountKey
    ? eq(signInAttempts.accountKey, by.accountKey)
    : eq(signInAttempts.addressKey, by.addressKey ?? '')
  const rows = await db
    .select({ failedAt: signInAttempts.failedAt })
    .from(signInAttempts)
    .where(and(key, gt(signInAttempts.failedAt, since)))
    .orderBy(asc(signInAttempts.failedAt))
  return { n: rows.length, oldest: rows[0]?.failedAt ?? null }
}

export async function insertFailure(
  db: Db,
  row: { accountKey: string; addressKey: string; failedAt: Date },
): Promise<number> {
  const [made] = await db.insert(signInAttempts).values(row).$returningId()
  return made!.id
}

export async function deleteFailure(db: Db, id: number): Promise<void> {
  await db.delete(signInAttempts).where(eq(signInAttempts.id, id))
}

export async function clearFailures(db: Reader, accountKey: string): Promise<void> {
  await db.delete(signInAttempts).where(eq(signInAttempts.accountKey, accountKey))
}

export async function insertReset(tx: Tx, row: typeof passwordResets.$inferInsert): Promise<void> {
  await tx.insert(passwordResets).values(row)
}

/** Locks the row: a link works once, also in two windows at once. */
export async function lockReset(tx: Tx, tokenHash: string) {
  const rows = await tx.select().from(passwordResets).where(eq(passwordResets.tokenHash, tokenHash)).for('update')
  return rows[0] ?? null
}

export async function markResetUsed(tx: Tx, id: number, at: Date): Promise<void> {
  await tx.update(passwordResets).set({ usedAt: at }).where(eq(passwordResets.id, id))
}
