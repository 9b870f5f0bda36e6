import type { Tx } from '../db/client.ts'
import { auditLog } from './audit.tables.ts'

type Row = typeof auditLog.$inferInsert

export async function insertAudit(tx: Tx, rows: Row[]): Promise<void> {
  for (let i = 0; i < rows.length; i += 500) await tx.insert(auditLog).values(rows.slice(i, i + 500))
}
