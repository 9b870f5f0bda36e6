import type { Movement } from '#shared/contracts/bins.ts'
import { fold } from '#shared/ledger/fold.ts'
import type { Clock } from '../clock.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { peopleNames } from '../people/people.service.ts'
import { groupBy, pageOf } from './bin-view.service.ts'
import { listLedger } from './counts.repository.ts'
import { toLedgerRow } from './levels.service.ts'

/** A coordinator sees names this long; afterwards, and for everybody else, the role alone. */
const nameDays = 14

/** The ledger of one bin, newest first, each row with what it left on the shelf. The caller checked the scope. */
export async function listMovements(
  db: Reader,
  clock: Clock,
  actor: Actor,
  binId: number,
  query: { page: number; pageSize: number },
) {
  const rows = await listLedger(db, binId)
  const byAssignment = groupBy(rows, (r) => r.assignmentId)
  const after = new Map<string, { onHandAfter: number; voidedBy: string | null }>()
  for (const own of byAssignment.values()) {
    for (const f of fold(own.map(toLedgerRow)).rows)
      after.set(`${f.row.opId}/${f.row.part}`, { onHandAfter: f.onHandAfter, voidedBy: f.voidedBy })
  }
  const newestFirst = [...rows].sort((a, b) => b.effectiveAt.getTime() - a.effectiveAt.getTime() || b.id - a.id)
  const page = pageOf(newestFirst, query)
  const names = await peopleNames(
    db,
    page.items.map((r) => r.userId),
  )
  const recent = clock.now().getTime() - nameDays * 86_400_000
  const items: Movement[] = page.items.map((row) => {
    const folded = after.get(`${row.opId}/${row.part}`)
    const person = names.get(row.userId)
    const named = row.userId === actor.id || (actor.role === 'coordinator' && row.recordedAt.getTime() >= recent)
    return {
      id: String(row.id),
      opId: row.opId,
      type: row.type,
      quantity: row.quantity,
      onHandAfter: folded?.onHandAfter ?? 0,
      itemId: String(row.itemId),
      effectiveAt: row.effectiveAt.toISOString(),
      recordedAt: row.recordedAt.toISOString(),
      by: named ? String(row.userId) : null,
      byName: named ? (person?.name ?? null) : null,
      byRole: person?.role ?? null,
      deviceId: row.deviceId,
      reason: row.reason,
      targetOpId: row.targetOpId,
      voidedBy: folded?.voidedBy ?? null,
      flags: row.flags,
    }
  })
  return { ...page, items }
}
