import { DateTime } from 'luxon'
import type { ReviewRow } from '#shared/contracts/policy.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, pageOf, viewBin, viewBins, type BinView } from '../counts/bin-view.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import {
  askedPlaces,
  cycleCounts,
  intervalCounts,
  movedSince,
  recompute,
  warningsOf,
} from '../policy/policy.service.ts'
import { peopleNames } from '../people/people.service.ts'
import { aimsOf, type Aim } from './aims.service.ts'
import * as repo from './review.repository.ts'

const longestYears = 2

interface LevelInput {
  level: number
  reason: string
  policyReference: string
  reviewBy: string
}

/** The bin an aim is for: it needs an item, and an overflow place has no aim of its own. */
async function subjectOf(tx: Tx, clock: Clock, actor: Actor, binId: number): Promise<BinView> {
  const { timeZone } = await readHospital(tx)
  const view = await viewBin(tx, momentOf(clock, timeZone), actor, binId)
  if (view.bin.retired || view.row.itemId === null)
    throw problem('not-found', 'This place holds no item, so it has no aim.')
  if (view.bin.overflowOf !== null)
    throw problem('not-found', 'An overflow place has no aim of its own; its main place has.')
  return view
}

async function checkLevel(tx: Tx, clock: Clock, input: LevelInput): Promise<{ twoPersons: boolean }> {
  const hospital = await readHospital(tx)
  if (input.level < hospital.floor || input.level > hospital.ceiling) {
    throw fieldProblem(
      '/level',
      `choose an aim between the hospital's floor, ${hospital.floor}, and its ceiling, ${hospital.ceiling}`,
    )
  }
  const today = DateTime.fromJSDate(clock.now(), { zone: hospital.timeZone }).startOf('day')
  const date = DateTime.fromISO(input.reviewBy, { zone: hospital.timeZone })
  if (date <= today) throw fieldProblem('/reviewBy', 'choose a day after today')
  if (date > today.plus({ years: longestYears }))
    throw fieldProblem('/reviewBy', 'choose a day at most two years from now')
  return { twoPersons: hospital.twoPersons }
}

/**
 * Sets the aim of one bin, or proposes it where a second person decides.
 * An earlier override ends and is kept; the policy follows in the same transaction.
 * @returns whether it is in force now
 */
export async function setLevel(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  binId: number,
  input: LevelInput,
): Promise<{ inForce: boolean }> {
  await subjectOf(tx, clock, actor, binId)
  const { twoPersons } = await checkLevel(tx, clock, input)
  const now = clock.now()
  const inForce = actor.role === 'reviewer' && !twoPersons
  if (inForce) await repo.endOverridesOfBin(tx, binId, actor.id, now)
  else await refuseSecondProposal(tx, actor, binId)
  await repo.declineProposalsOfBin(tx, binId, actor.id, now)
  const id = await repo.insertOverride(tx, {
    binId,
    ...input,
    state: inForce ? 'in-force' : 'proposed',
    proposedBy: actor.id,
    proposedAt: now,
    ...(inForce ? { decidedBy: actor.id, decidedAt: now } : {}),
  })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: inForce ? 'service-level-set' : 'service-level-proposed',
    subject: 'bin',
    subjectId: binId,
    after: { overrideId: id, level: input.level, reviewBy: input.reviewBy, policyReference: input.policyReference },
    reason: input.reason,
  })
  if (inForce) await recompute(tx, clock, binId, 'service-level')
  return { inForce }
}

/** What somebody else proposed is decided, not pushed aside. */
async function refuseSecondProposal(tx: Tx, actor: Actor, binId: number): Promise<void> {
  const [pending] = await repo.listOverrides(tx, [binId], [], ['proposed'])
  if (pending && pending.proposedBy !== actor.id) {
    throw problem('already-exists', 'Somebody else has proposed an aim for this place. It has to be decided first.')
  }
}

/** Ends the aim set for one bin; its item's or class level holds again. */
export async function endLevel(tx: Tx, clock: Clock, actor: Actor, binId: number): Promise<void> {
  await subjectOf(tx, clock, actor, binId)
  const now = clock.now()
  if ((await repo.endOverridesOfBin(tx, binId, actor.id, now)) === 0)
    throw problem('not-found', 'No aim is set for this place itself.')
  await audit(tx, { at: now, userId: actor.id, action: 'service-level-ended', subject: 'bin', subjectId: binId })
  await recompute(tx, clock, binId, 'service-level')
}

/** A second person decides. @returns the bin it was about */
export async function decide(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: { decision: 'approve' | 'decline'; note: string },
): Promise<number> {
  const proposal = await repo.lockOverride(tx, id)
  if (!proposal?.binId) throw problem('not-found')
  const { binId } = proposal
  await subjectOf(tx, clock, actor, binId)
  if (proposal.state !== 'proposed') throw problem('already-decided')
  if (proposal.proposedBy === actor.id) throw problem('own-proposal')
  const now = clock.now()
  const approved = input.decision === 'approve'
  if (approved) {
    await checkLevel(tx, clock, proposal)
    await repo.endOverridesOfBin(tx, binId, actor.id, now)
  }
  await repo.updateOverride(tx, id, { state: approved ? 'in-force' : 'declined', decidedBy: actor.id, decidedAt: now })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: approved ? 'service-level-approved' : 'service-level-declined',
    subject: 'bin',
    subjectId: binId,
    after: { overrideId: id },
    reason: input.note || null,
  })
  if (approved) await recompute(tx, clock, binId, 'service-level')
  return binId
}

/** A hard minimum, apart from what is worked out; null takes it away. */
export async function setFloor(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  binId: number,
  input: { floor: number | null; reason: string },
): Promise<void> {
  await subjectOf(tx, clock, actor, binId)
  const now = clock.now()
  await repo.endFloor(tx, binId, now)
  if (input.floor !== null)
    await repo.insertFloor(tx, { binId, floor: input.floor, reason: input.reason, setBy: actor.id, setAt: now })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'floor-set',
    subject: 'bin',
    subjectId: binId,
    after: { floor: input.floor },
    reason: input.reason,
  })
  await recompute(tx, clock, binId, 'service-level')
}

/** A person's yes: from now on the place is kept by what is worked out. Vital items are the reviewer's. */
export async function acceptCalculated(tx: Tx, clock: Clock, actor: Actor, binId: number): Promise<void> {
  const view = await subjectOf(tx, clock, actor, binId)
  if (view.row.ved === 'V' && actor.role !== 'reviewer') {
    throw problem('not-allowed', 'This item is vital: the reviewer decides how it is kept.')
  }
  if (view.row.roomMode !== 'calculated') {
    throw problem('already-decided', 'This room is kept by entered levels. Change how the room is kept first.')
  }
  const now = clock.now()
  await audit(tx, { at: now, userId: actor.id, action: 'calculation-accepted', subject: 'bin', subjectId: binId })
  await recompute(tx, clock, binId, 'accepted')
}

/** What waits for a second person, by bin; the proposer's role, or the name where the reader may see it. */
export async function proposalsOf(db: Reader, actor: Actor, binIds: number[]) {
  const rows = await repo.listOverrides(db, binIds, [], ['proposed'])
  const names = await peopleNames(
    db,
    rows.map((r) => r.proposedBy),
  )
  return new Map(
    rows.flatMap((r) => {
      if (r.binId === null) return []
      const own = r.proposedBy === actor.id
      const person = names.get(r.proposedBy)
      const byName = own || actor.role === 'coordinator' ? (person?.name ?? '') : (person?.role ?? '')
      return [
        [
          r.binId,
          {
            id: String(r.id),
            level: r.level,
            reason: r.reason,
            policyReference: r.policyReference,
            reviewBy: r.reviewBy,
            byName,
            own,
          },
        ] as const,
      ]
    }),
  )
}

function reviewState(aim: Aim, today: DateTime): ReviewRow['review'] {
  if (!aim.reviewBy) return 'none'
  const date = DateTime.fromISO(aim.reviewBy, { zone: today.zone })
  if (date <= today) return 'due'
  return date <= today.plus({ days: 7 }) ? 'this-week' : 'later'
}

const urgency: Record<ReviewRow['review'], number> = { due: 0, 'this-week': 1, later: 2, none: 2 }

interface ListQuery {
  show: 'due' | 'proposed' | 'vital' | 'moved' | 'asked' | 'all'
  roomId?: string
  q?: string
  page: number
  pageSize: number
}

/** Every place with an aim, in scope. */
export async function reviewRows(
  db: Reader,
  clock: Clock,
  actor: Actor,
  filter: { roomId?: string; q?: string },
): Promise<ReviewRow[]> {
  const { timeZone } = await readHospital(db)
  const views = (
    await viewBins(db, momentOf(clock, timeZone), {
      roomIds: actor.roomIds,
      roomId: filter.roomId === undefined ? undefined : Number(filter.roomId),
      q: filter.q || undefined,
      retired: false,
    })
  ).filter((v) => v.row.itemId !== null && v.row.overflowOf === null)
  const ids = views.map((v) => v.row.id)
  const aims = await aimsOf(
    db,
    views.map((v) => ({ binId: v.row.id, itemId: v.row.itemId!, ved: v.row.ved ?? 'D' })),
  )
  const counts = new Map((await intervalCounts(db, ids)).map((c) => [c.binId, c]))
  const cycles = new Map((await cycleCounts(db, ids)).map((c) => [c.binId, c]))
  const proposals = await proposalsOf(db, actor, ids)
  const warnings = await warningsOf(db)
  const asked = await askedPlaces(db)
  const today = DateTime.fromJSDate(clock.now(), { zone: timeZone }).startOf('day')
  return views.map((v) => {
    const aim = aims.get(v.row.id)!
    const seen = counts.get(v.row.id)
    const proposal = proposals.get(v.row.id)
    return {
      ...v.bin,
      target: aim.target,
      source: aim.source,
      reviewBy: aim.reviewBy,
      review: reviewState(aim, today),
      intervals: seen?.intervals ?? 0,
      days: seen?.days ?? 0,
      runOuts: { found: cycles.get(v.row.id)?.found ?? 0, cycles: cycles.get(v.row.id)?.cycles ?? 0 },
      proposal: proposal
        ? { id: proposal.id, level: proposal.level, byName: proposal.byName, own: proposal.own }
        : null,
      warnings: warnings.get(v.row.id) ?? [],
      questions: asked.get(v.row.id) ?? 0,
    }
  })
}

const movedDays = 7

/** Due for review first, then proposed, then vital, then by how far under. */
export async function listReview(db: Reader, clock: Clock, actor: Actor, query: ListQuery) {
  const rows = await reviewRows(db, clock, actor, query)
  const moved = query.show === 'moved' ? new Set((await recentMoves(db, clock)).map((m) => String(m.binId))) : null
  const wanted = rows.filter((r) => {
    if (query.show === 'due') return r.review === 'due' || r.review === 'this-week'
    if (query.show === 'asked') return r.questions > 0
    if (query.show === 'proposed') return r.proposal !== null
    if (query.show === 'vital')
      return r.item?.ved === 'V' || r.review === 'due' || r.review === 'this-week' || r.proposal !== null
    return moved === null || moved.has(r.id)
  })
  const rank = (r: ReviewRow): number => urgency[r.review] * 4 + (r.proposal ? 0 : 2) + (r.item?.ved === 'V' ? 0 : 1)
  wanted.sort((a, b) => rank(a) - rank(b) || b.under - a.under || Number(a.id) - Number(b.id))
  return pageOf(wanted, query)
}

/** Reorder points in force that moved in the last week. */
export const recentMoves = (db: Reader, clock: Clock) =>
  movedSince(db, new Date(clock.now().getTime() - movedDays * 86_400_000))
