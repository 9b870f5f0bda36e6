import { boolean, index, int, mysqlTable, primaryKey, unique, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, jsonOf, ref } from '../db/columns.ts'
import type { Role } from '#shared/contracts/contract.ts'

export const users = mysqlTable('users', {
  id: id(),
  email: varchar({ length: 200 }).notNull().unique(),
  staffCode: varchar({ length: 32 }).notNull().unique(),
  role: varchar({ length: 20 }).$type<Role>().notNull(),
  passwordHash: varchar({ length: 200 }).notNull(),
  isAllRooms: boolean().notNull().default(false),
  /** Raised when role, rooms or standing change: phones then drop what they cached. */
  authzVersion: int().notNull().default(1),
  createdAt: instant().notNull(),
  retiredAt: instant(),
})

/** Names stand here and nowhere else, so that a name can be erased without touching ledger or audit. */
export const personNames = mysqlTable('person_names', {
  userId: ref()
    .primaryKey()
    .references(() => users.id),
  name: varchar({ length: 120 }).notNull(),
})

export const userRooms = mysqlTable(
  'user_rooms',
  {
    userId: ref()
      .notNull()
      .references(() => users.id),
    roomId: ref().notNull(),
  },
  (t) => [primaryKey({ columns: [t.userId, t.roomId] })],
)

export const sessions = mysqlTable(
  'sessions',
  {
    sid: varchar({ length: 64 }).primaryKey(),
    userId: ref(),
    data: jsonOf<unknown>().notNull(),
    createdAt: instant().notNull(),
    expiresAt: instant().notNull(),
  },
  (t) => [index('sessions_user').on(t.userId), index('sessions_expires').on(t.expiresAt)],
)

/** Failures only. Keys are hashes: the table names nobody. */
export const signInAttempts = mysqlTable(
  'sign_in_attempts',
  {
    id: id(),
    accountKey: varchar({ length: 64 }).notNull(),
    addressKey: varchar({ length: 64 }).notNull(),
    failedAt: instant().notNull(),
  },
  (t) => [
    index('sign_in_attempts_account').on(t.accountKey, t.failedAt),
    index('sign_in_attempts_address').on(t.addressKey, t.failedAt),
  ],
)

export const passwordResets = mysqlTable(
  'password_resets',
  {
    id: id(),
    tokenHash: varchar({ length: 64 }).notNull(),
    userId: ref()
      .notNull()
      .references(() => users.id),
    createdAt: instant().notNull(),
    expiresAt: instant().notNull(),
    usedAt: instant(),
  },
  (t) => [unique('password_resets_token').on(t.tokenHash), index('password_resets_user').on(t.userId)],
)
