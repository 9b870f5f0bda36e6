import { index, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, jsonOf, ref } from '../db/columns.ts'

/** Append-only. Who by id, never by name. */
export const auditLog = mysqlTable(
  'audit_log',
  {
    id: id(),
    at: instant().notNull(),
    userId: ref(),
    action: varchar({ length: 40 }).notNull(),
    subject: varchar({ length: 30 }).notNull(),
    subjectId: varchar({ length: 40 }).notNull(),
    before: jsonOf<unknown>(),
    after: jsonOf<unknown>(),
    reason: varchar({ length: 500 }),
  },
  (t) => [index('audit_log_subject').on(t.subject, t.subjectId), index('audit_log_at').on(t.at)],
)
