import type { Tx } from '../db/client.ts'
import { insertAudit } from './audit.repository.ts'

/** One change, as the audit log keeps it: who by id, what, and the values before and after. */
export interface AuditEntry {
  at: Date
  userId: number | null
  action: string
  subject: string
  subjectId: string | number
  before?: unknown
  after?: unknown
  reason?: string | null
}

/** Writes into the transaction of the change itself: either both stand or neither. */
export async function audit(tx: Tx, ...entries: AuditEntry[]): Promise<void> {
  if (entries.length === 0) return
  await insertAudit(
    tx,
    entries.map((e) => ({
      at: e.at,
      userId: e.userId,
      action: e.action,
      subject: e.subject,
      subjectId: String(e.subjectId),
      before: e.before ?? null,
      after: e.after ?? null,
      reason: e.reason ?? null,
    })),
  )
}
