import type { BinPolicy } from '#shared/contracts/policy.ts'
import { problem } from '#shared/contracts/problems.ts'
import { usualActivity } from '#shared/demand/activity.ts'
import { seenFactor } from '#shared/demand/seen-factor.ts'
import { weekdayProfile } from '#shared/demand/weekday-profile.ts'
import { poolPrior, type PoolMember } from '#shared/policy/pool.ts'
import { audit } from '../audit/audit.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { groupBy, momentOf, viewBin, viewBins } from '../counts/bin-view.service.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import type { Actor } from '../http/context.ts'
import { endPoolExclusions, insertPoolExclusion, listPoolExclusions } from './exclusions.repository.ts'
import { updateChange, listScopeIntervals } from './planned-changes.repository.ts'
import { activityChange, spanOf, standingChanges } from './planned-changes.service.ts'
import type { PolicyFacts } from './policy-facts.ts'
import { recompute } from './policy.service.ts'
import * as repo from './pools.repository.ts'

/** A weight of a weekday has to move by this much before a profile is replaced: less is noise, and moves every figure. */
const worthMoving = 0.03

/**
 * Freezes what places teach each other until the next night: weekdays of each ward, like wards of each item, and how
 * planned changes really turned out. Made from what stood when the night began, so no result depends on the order.
 */
export async function freezeShared(db: Db, clock: Clock): Promise<void> {
  await freezeProfiles(db, clock)
  await freezePools(db, clock)
  await freezeSeenFactors(db, clock)
}

// Weekdays --------------------------------------------------------------------------------------------------------
async function freezeProfiles(db: Db, clock: Clock): Promise<void> {
  const { timeZone } = await readHospital(db)
  const changes = await standingChanges(db)
  const known = new Map((await repo.listProfiles(db)).map((p) => [p.wardId, p]))
  for (const wardId of await repo.listWardIds(db)) {
    const rows = await repo.listWardIntervals(db, wardId)
    const bins = [...groupBy(rows, (r) => r.binId).values()].map((own) =>
      own.map((r) => ({
        from: r.openedAt.getTime(),
        to: r.closedAt.getTime(),
        quantity: r.quantity,
      })),
    )
    const bearing = changes.filter(
      (c) => c.roomId === null && c.itemIds.length === 0 && (c.wardId ?? wardId) === wardId,
    )
    const weights = weekdayProfile({
      zone: timeZone,
      bins,
      changes: bearing.map((c) => activityChange(c, timeZone, 1)),
    })
    const before = known.get(wardId)?.weights ?? usualActivity(timeZone).weekday
    if (weights.every((w, i) => Math.abs(w - before[i]!) < worthMoving)) continue
    await inTransaction(db, (tx) =>
      repo.replaceProfile(tx, { wardId, weights: [...weights], intervals: rows.length, madeAt: clock.now() }),
    )
  }
}

// Like wards ------------------------------------------------------------------------------------------------------
/** A member of a pool as kept, to be shown and to be left out. */
interface KeptMember extends PoolMember {
  leftOut: boolean
}

type MemberRow = Awaited<ReturnType<typeof repo.listMembers>>[number]

function toMember(row: MemberRow): PoolMember | null {
  const member = (typeof row.member === 'string' ? JSON.parse(row.member) : row.member) as PolicyFacts['member']
  return member && { key: String(row.binId), wardId: String(row.wardId), ...member }
}

async function freezePools(db: Db, clock: Clock): Promise<void> {
  const { pooling } = await readHospital(db)
  const rows = pooling ? await poolRows(db, clock.now()) : []
  await inTransaction(db, (tx) => repo.replacePools(tx, rows))
}

/** The pools of every item and kind of ward, or of one item. */
async function poolRows(db: Reader, now: Date, onlyItem: number | null = null) {
  const all = (await repo.listMembers(db)).flatMap((row) => {
    const member = toMember(row)
    return member ? [{ row, member }] : []
  })
  const leftOut = new Set((await listPoolExclusions(db)).map((e) => `${e.itemId} ${e.wardId}`))
  const counts = (x: (typeof all)[number]): boolean => !leftOut.has(`${x.row.itemId} ${x.row.wardId}`)
  const byCategory = new Map<string, Map<number, PoolMember[]>>()
  for (const x of all.filter(counts)) {
    const items = byCategory.get(x.row.category) ?? new Map<number, PoolMember[]>()
    items.set(x.row.itemId, [...(items.get(x.row.itemId) ?? []), x.member])
    byCategory.set(x.row.category, items)
  }
  const groups = new Map<string, typeof all>()
  for (const x of all) {
    if (onlyItem !== null && x.row.itemId !== onlyItem) continue
    const key = `${x.row.itemId} ${x.row.wardKind}`
    groups.set(key, [...(groups.get(key) ?? []), x])
  }
  return [...groups.values()].flatMap((group) => {
    const { itemId, wardKind, category } = group[0]!.row
    const likeItems = byCategory.get(category) ?? new Map<number, PoolMember[]>()
    const prior = poolPrior(
      group.filter(counts).map((x) => x.member),
      [...likeItems.values()],
    )
    if (!prior) return []
    const members: KeptMember[] = group.map((x) => ({ ...x.member, leftOut: !counts(x) }))
    return [
      {
        itemId,
        wardKind,
        nu0: prior.nu0,
        w0: prior.w0,
        rateA: prior.rate?.a ?? null,
        rateB: prior.rate?.b ?? null,
        basis: prior.basis,
        members,
        madeAt: now,
      },
    ]
  })
}

/** Leaves a ward out of what helps an item, or takes it in again; every place of the item there follows. */
export async function setPoolWard(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  binId: number,
  input: { wardId: string; leftOut: boolean; reason: string },
): Promise<void> {
  const { timeZone } = await readHospital(tx)
  const moment = momentOf(clock, timeZone)
  const view = await viewBin(tx, moment, actor, binId)
  const itemId = view.row.itemId
  const pool = itemId === null ? null : await repo.findPool(tx, itemId, view.row.wardKind)
  const wardId = Number(input.wardId)
  const isMember = ((pool?.members ?? []) as KeptMember[]).some((m) => m.wardId === input.wardId)
  if (itemId === null || !isMember) throw problem('not-found', 'That ward does not help this place.')
  const now = clock.now()
  await endPoolExclusions(tx, itemId, wardId, actor.id, now)
  if (input.leftOut)
    await insertPoolExclusion(tx, { itemId, wardId, reason: input.reason, createdBy: actor.id, createdAt: now })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: input.leftOut ? 'like-ward-left-out' : 'like-ward-taken-in',
    subject: 'item',
    subjectId: itemId,
    after: { wardId },
    reason: input.reason,
  })
  await repo.replacePoolsOfItem(tx, itemId, await poolRows(tx, now, itemId))
  const like = await viewBins(tx, moment, { roomIds: null, itemId, retired: false })
  for (const other of like.filter((v) => v.row.wardKind === view.row.wardKind).sort((a, b) => a.row.id - b.row.id))
    await recompute(tx, clock, other.row.id, 'like-wards')
}

/** The wards that help a bin, its own among them. */
export async function readPool(
  db: Reader,
  bin: { itemId: number | null; wardId: number; wardKind: string },
  learnt: PolicyFacts | null,
): Promise<BinPolicy['pool']> {
  const facts = learnt?.pool ?? null
  const pool = bin.itemId === null || facts === null ? null : await repo.findPool(db, bin.itemId, bin.wardKind)
  if (!pool || !facts) return null
  const names = new Map((await repo.listWardNames(db)).map((w) => [String(w.id), w.name]))
  const wards = groupBy(pool.members as KeptMember[], (m) => Number(m.wardId))
  // A place that began to count after the pool was made stands beside it with what it has.
  if (!wards.has(bin.wardId) && learnt?.member)
    wards.set(bin.wardId, [{ key: '', wardId: String(bin.wardId), ...learnt.member, leftOut: false }])
  return {
    basis: facts.basis,
    ownShare: facts.ownShare,
    wards:
      facts.basis === 'category'
        ? []
        : [...wards].map(([wardId, members]) => ({
            wardId: String(wardId),
            name: names.get(String(wardId)) ?? '',
            meanPerDay:
              members.reduce((sum, m) => sum + m.quantity, 0) /
              Math.max(
                1e-9,
                members.reduce((sum, m) => sum + m.exposureDays, 0),
              ),
            own: wardId === bin.wardId,
            leftOut: members.every((m) => m.leftOut),
          })),
  }
}

// Planned changes -------------------------------------------------------------------------------------------------
/** Use before a change says what is usual; further back it says little of today. */
const usualDays = 180

/** What counts say of each factor since it began: pooled over the places it is about. */
async function freezeSeenFactors(db: Db, clock: Clock): Promise<void> {
  const { timeZone } = await readHospital(db)
  const now = clock.now().getTime()
  for (const change of await standingChanges(db)) {
    const { from, to } = spanOf(change, timeZone)
    if (change.kind !== 'factor' || from > now) continue
    const until = new Date(Math.min(now, to ?? Infinity))
    const weighed = change.usedFactor ?? change.factor ?? 1
    const rows = await listScopeIntervals(db, change, new Date(from - usualDays * dayMs), until)
    const bins = [...groupBy(rows, (r) => r.binId).values()].flatMap((own) => {
      const before = own.filter((r) => r.closedAt.getTime() <= from)
      const days = sumOf(before, (r) => r.exposureDays)
      if (days === 0) return []
      const inside = own
        .filter((r) => r.openedAt.getTime() >= from)
        // Their exposure was weighed with the factor as it stood: what is looked for is the factor itself.
        .map((r) => ({ quantity: r.quantity, exposureDays: r.exposureDays / weighed }))
      return [{ basePerDay: sumOf(before, (r) => r.quantity) / days, inside }]
    })
    const seen = seenFactor({ entered: change.factor ?? 1, bins })
    const used = Math.round(seen.used * 100) / 100
    if (seen.intervals === change.seenIntervals && used === change.usedFactor) continue
    await inTransaction(db, (tx) =>
      updateChange(tx, change.id, { seenFactor: seen.seen, seenIntervals: seen.intervals, usedFactor: used }),
    )
  }
}

const dayMs = 86_400_000
const sumOf = <T>(rows: readonly T[], of: (row: T) => number): number => rows.reduce((sum, row) => sum + of(row), 0)
