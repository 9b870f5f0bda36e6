import { createHash, randomBytes } from 'node:crypto'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import type { User, UserRecord } from '#shared/contracts/people.ts'
import type { Role } from '#shared/contracts/contract.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { duplicateKey, isDuplicate } from '../db/errors.ts'
import type { Actor } from '../http/context.ts'
import { queueMail } from '../mail/mail.service.ts'
import { hashPassword, passwordObjection, verifyPassword } from './passwords.ts'
import {
  deleteExpired,
  deleteSessionsOf,
  existingRooms,
  findPerson,
  findPersonBySignIn,
  insertPerson,
  insertReset,
  listPeople,
  lockReset,
  markResetUsed,
  namesOf,
  updatePerson,
  type Person,
  type PersonChange,
} from './people.repository.ts'
import { attemptKeys, countAttempt, forgetFailures } from './throttle.ts'

export const toActor = (p: Person): Actor => ({
  id: p.id,
  role: p.role,
  roomIds: p.roomIds,
  authzVersion: p.authzVersion,
})

export const toUser = (p: Person): User => ({
  id: String(p.id),
  name: p.name,
  email: p.email,
  staffCode: p.staffCode,
  role: p.role,
  roomIds: p.roomIds?.map(String) ?? null,
})

const toRecord = (p: Person): UserRecord => ({ ...toUser(p), retired: p.retiredAt !== null })

/** A hash of nothing anyone knows: looked at when the account does not exist, so that both answers take equally long. */
let decoy: Promise<string> | null = null

/**
 * Looks at a sign-in. @returns the person, or null when the two do not match
 * @throws {Problem} too-many-attempts
 */
export async function checkSignIn(
  db: Db,
  clock: Clock,
  by: { email?: string; staffCode?: string },
  password: string,
  address: string,
): Promise<Person | null> {
  const person = await findPersonBySignIn(db, by)
  // One account, whether it is named by e-mail or by staff code.
  const keys = attemptKeys(person ? `person ${person.id}` : (by.email ?? by.staffCode ?? ''), address)
  const wait = await countAttempt(db, clock, keys)
  if (wait) await new Promise((resolve) => setTimeout(resolve, wait))
  decoy ??= hashPassword(randomBytes(16).toString('hex'))
  const matches = await verifyPassword(person?.passwordHash ?? (await decoy), password)
  if (!person || person.retiredAt || !matches) return null
  await forgetFailures(db, keys)
  return person
}

/** The person behind a session; null once retired. */
export async function findActor(db: Reader, id: number): Promise<Actor | null> {
  const person = await findPerson(db, id)
  return person && !person.retiredAt ? toActor(person) : null
}

export async function readUser(db: Reader, id: number): Promise<User | null> {
  const person = await findPerson(db, id)
  return person && !person.retiredAt ? toUser(person) : null
}

function checkNewPassword(
  password: string,
  person: { email: string; name: string; staffCode: string },
  pointer: string,
): void {
  const objection = passwordObjection(password, person)
  if (objection) throw fieldProblem(pointer, objection)
}

export async function changePassword(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  input: { currentPassword: string; newPassword: string; sid: string },
): Promise<void> {
  const person = await findPerson(tx, actor.id)
  if (!person) throw problem('not-signed-in')
  if (!(await verifyPassword(person.passwordHash, input.currentPassword))) {
    throw fieldProblem('/currentPassword', 'this is not your present password')
  }
  checkNewPassword(input.newPassword, person, '/newPassword')
  await updatePerson(tx, person.id, { passwordHash: await hashPassword(input.newPassword) })
  await deleteSessionsOf(tx, person.id, input.sid)
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'password-changed',
    subject: 'person',
    subjectId: person.id,
  })
}

const resetMinutes = 60
const hashToken = (token: string): string => createHash('sha256').update(token).digest('hex')

/** Queues the mail with the link when the address is known; the caller answers the same either way. */
export async function askReset(tx: Tx, clock: Clock, email: string, baseUrl: string): Promise<void> {
  const person = await findPersonBySignIn(tx, { email })
  if (!person || person.retiredAt) return
  const token = randomBytes(24).toString('base64url')
  const now = clock.now()
  const tokenHash = hashToken(token)
  await insertReset(tx, {
    tokenHash,
    userId: person.id,
    createdAt: now,
    expiresAt: new Date(now.getTime() + resetMinutes * 60_000),
  })
  await queueMail(tx, now, {
    dedupeKey: `reset-${tokenHash.slice(0, 24)}`,
    to: person.email,
    subject: 'Set a new password for Brimline',
    body: [
      `Hello ${person.name},`,
      '',
      'somebody asked for a new password for your account. If it was you, open this link within an hour:',
      '',
      `${baseUrl}/password-reset/${token}`,
      '',
      'If it was not you, do nothing: your password stays as it is.',
    ].join('\n'),
  })
}

export async function useReset(tx: Tx, clock: Clock, token: string, newPassword: string): Promise<void> {
  const reset = await lockReset(tx, hashToken(token))
  const now = clock.now()
  if (!reset || reset.usedAt || reset.expiresAt <= now) throw problem('link-used-up')
  const person = await findPerson(tx, reset.userId)
  if (!person || person.retiredAt) throw problem('link-used-up')
  checkNewPassword(newPassword, person, '/newPassword')
  await updatePerson(tx, person.id, { passwordHash: await hashPassword(newPassword) })
  await markResetUsed(tx, reset.id, now)
  await deleteSessionsOf(tx, person.id, null)
  await audit(tx, { at: now, userId: person.id, action: 'password-reset', subject: 'person', subjectId: person.id })
}

export async function listUserRecords(
  db: Reader,
  filter: { q?: string; retired: boolean; page: number; pageSize: number },
) {
  const { rows, total } = await listPeople(db, {
    q: filter.q,
    retired: filter.retired,
    offset: (filter.page - 1) * filter.pageSize,
    limit: filter.pageSize,
  })
  return { items: rows.map(toRecord), total, page: filter.page, pageSize: filter.pageSize }
}

interface UserFields {
  name: string
  email: string
  staffCode: string
  role: Role
  roomIds: string[] | null
  password: string
}

async function checkedRooms(tx: Tx, roomIds: string[] | null): Promise<number[] | null> {
  if (roomIds === null) return null
  const ids = roomIds.map(Number)
  const known = await existingRooms(tx, ids)
  const wrong = ids.findIndex((id) => !known.has(id))
  if (wrong >= 0) throw fieldProblem(`/roomIds/${wrong}`, 'there is no such room')
  return ids
}

/** The unique keys say which of the two is taken. */
function takenProblem(error: unknown): unknown {
  if (!isDuplicate(error)) return error
  return /staff/i.test(duplicateKey(error))
    ? fieldProblem('/staffCode', 'another person has this staff code')
    : fieldProblem('/email', 'another person has this e-mail')
}

const auditView = (p: Person) => ({ role: p.role, roomIds: p.roomIds, retired: p.retiredAt !== null })

export async function createUser(tx: Tx, clock: Clock, actorId: number | null, input: UserFields): Promise<UserRecord> {
  checkNewPassword(input.password, input, '/password')
  const now = clock.now()
  const passwordHash = await hashPassword(input.password)
  const roomIds = await checkedRooms(tx, input.roomIds)
  const id = await insertPerson(tx, { ...input, roomIds, passwordHash, createdAt: now }).catch((error: unknown) => {
    throw takenProblem(error)
  })
  const person = (await findPerson(tx, id))!
  await audit(tx, {
    at: now,
    userId: actorId,
    action: 'person-added',
    subject: 'person',
    subjectId: id,
    after: auditView(person),
  })
  return toRecord(person)
}

export async function updateUser(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Partial<UserFields> & { retired?: boolean },
): Promise<UserRecord> {
  const before = await findPerson(tx, id)
  if (!before) throw problem('not-found')
  if (id === actor.id && (input.retired === true || (input.role && input.role !== before.role))) {
    throw problem('not-allowed', 'You cannot take your own rights away. Ask another administrator.')
  }
  const change: PersonChange = { name: input.name, email: input.email, staffCode: input.staffCode, role: input.role }
  if (input.roomIds !== undefined) change.roomIds = await checkedRooms(tx, input.roomIds)
  if (input.retired !== undefined) change.retiredAt = input.retired ? (before.retiredAt ?? clock.now()) : null
  if (input.password !== undefined) {
    checkNewPassword(input.password, { ...before, ...input, name: input.name ?? before.name }, '/password')
    change.passwordHash = await hashPassword(input.password)
  }
  change.raiseAuthz = input.role !== undefined || input.roomIds !== undefined || input.retired !== undefined
  const set = Object.fromEntries(Object.entries(change).filter(([, v]) => v !== undefined)) as PersonChange
  await updatePerson(tx, id, set).catch((error: unknown) => {
    throw takenProblem(error)
  })
  if (input.retired === true || input.password !== undefined) await deleteSessionsOf(tx, id, null)
  const after = (await findPerson(tx, id))!
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'person-changed',
    subject: 'person',
    subjectId: id,
    before: auditView(before),
    after: auditView(after),
  })
  return toRecord(after)
}

/** Names and roles by id. */
export const peopleNames = namesOf

/** Sweeps sessions and failures that no longer matter. */
export const sweepPeople = (db: Reader, clock: Clock): Promise<void> =>
  deleteExpired(db, clock.now(), new Date(clock.now().getTime() - 24 * 3_600_000))
