import { index, int, longtext, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core'
import { id, instant } from '../db/columns.ts'

/** Mail is written in the transaction that causes it and sent by a worker; the dedupe key is its Message-ID. */
export const mailOutbox = mysqlTable(
  'mail_outbox',
  {
    id: id(),
    dedupeKey: varchar({ length: 120 }).notNull(),
    recipient: varchar({ length: 200 }).notNull(),
    replyTo: varchar({ length: 200 }),
    subject: varchar({ length: 200 }).notNull(),
    body: longtext().notNull(),
    state: varchar({ length: 10 }).$type<'due' | 'sent' | 'failed'>().notNull(),
    attempts: int().notNull(),
    nextAt: instant().notNull(),
    leaseOwner: varchar({ length: 64 }),
    leaseUntil: instant(),
    lastError: varchar({ length: 300 }),
    createdAt: instant().notNull(),
    sentAt: instant(),
  },
  (t) => [unique('mail_outbox_dedupe').on(t.dedupeKey), index('mail_outbox_due').on(t.state, t.nextAt)],
)
