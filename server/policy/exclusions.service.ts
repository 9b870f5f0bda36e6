import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBin } from '../counts/bin-view.service.ts'
import { lockBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { peopleNames } from '../people/people.service.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import * as repo from './exclusions.repository.ts'
import { recompute } from './policy.service.ts'

interface Fields {
  kind: 'excluded' | 'history-start' | 'real'
  from: string
  to: string | null
  reason: string
}

const shortestMs = 3_600_000

/** Leaves a stretch out, starts the history anew, or says that an unusual stretch was real; the figures follow at once. */
export async function addExclusion(tx: Tx, clock: Clock, actor: Actor, binId: number, input: Fields): Promise<void> {
  const { timeZone } = await readHospital(tx)
  const view = await viewBin(tx, momentOf(clock, timeZone), actor, binId)
  if (view.row.assignmentId === null)
    throw problem('not-found', 'This place holds no item, so there is nothing to leave out.')
  if (view.row.overflowOf !== null)
    throw problem('not-found', 'An overflow place follows its main place. Leave the stretch out there.')
  const now = clock.now()
  const span = checkSpan(input, now)
  // Under the lock of the bin two people, or one who presses twice, cannot say the same at once.
  await lockBins(tx, [binId])
  const standing = await repo.listExclusions(tx, binId, view.row.assignmentId)
  if (standing.some((e) => isSame(e, input.kind, span)))
    throw problem('already-decided', 'This has been said of the same stretch already.')
  const id = await repo.insertExclusion(tx, {
    binId,
    assignmentId: view.row.assignmentId,
    kind: input.kind,
    fromAt: span.from,
    toAt: span.to,
    reason: input.reason,
    createdBy: actor.id,
    createdAt: now,
  })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: `demand-${input.kind}`,
    subject: 'bin',
    subjectId: binId,
    after: { exclusionId: id, from: input.from, to: input.to },
    reason: input.reason,
  })
  await recompute(tx, clock, binId, 'exclusion')
}

const isSame = (row: repo.ExclusionRow, kind: Fields['kind'], span: { from: Date; to: Date | null }): boolean =>
  row.kind === kind && row.fromAt.getTime() === span.from.getTime() && row.toAt?.getTime() === span.to?.getTime()

function checkSpan(input: Fields, now: Date): { from: Date; to: Date | null } {
  const from = new Date(input.from)
  if (from > now) throw fieldProblem('/from', 'choose a moment that has passed')
  if (input.kind === 'history-start') {
    if (input.to !== null) throw fieldProblem('/to', 'a start has no end: leave it out')
    return { from, to: null }
  }
  if (input.to === null) throw fieldProblem('/to', 'say until when')
  const to = new Date(input.to)
  if (to.getTime() - from.getTime() < shortestMs) throw fieldProblem('/to', 'it has to end after it began')
  if (to > now) throw fieldProblem('/to', 'choose a moment that has passed')
  return { from, to }
}

/** Lets it count again. @returns the bin it was about */
export async function endExclusion(tx: Tx, clock: Clock, actor: Actor, id: number, reason: string): Promise<number> {
  const row = await repo.lockExclusion(tx, id)
  if (!row) throw problem('not-found')
  const { timeZone } = await readHospital(tx)
  await viewBin(tx, momentOf(clock, timeZone), actor, row.binId)
  if (row.endedAt) throw problem('already-decided', 'It counts again already.')
  const now = clock.now()
  await repo.endExclusion(tx, id, actor.id, now)
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'demand-exclusion-ended',
    subject: 'bin',
    subjectId: row.binId,
    before: row,
    reason,
  })
  await recompute(tx, clock, row.binId, 'exclusion')
  return row.binId
}

/** What stands for a bin, with who said so: the name for the person and the coordinator, else the role. */
export async function readExclusions(
  db: Reader,
  actor: Actor,
  binId: number,
  assignmentId: number | null,
): Promise<BinPolicy['exclusions']> {
  const rows = await repo.listExclusions(db, binId, assignmentId)
  const people = await peopleNames(
    db,
    rows.map((r) => r.createdBy),
  )
  return rows.map((r) => {
    const person = people.get(r.createdBy)
    const seesName = r.createdBy === actor.id || actor.role === 'coordinator'
    return {
      id: String(r.id),
      kind: r.kind,
      from: r.fromAt.toISOString(),
      to: r.toAt?.toISOString() ?? null,
      reason: r.reason,
      byName: (seesName ? person?.name : person?.role) ?? '',
      at: r.createdAt.toISOString(),
    }
  })
}
