import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import type { Protection } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBin } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { readExclusions } from '../policy/exclusions.service.ts'
import type { PolicyFacts } from '../policy/policy-facts.ts'
import { currentPolicy, factsOf, policyHistory, storedIntervals } from '../policy/policy.service.ts'
import { readPool } from '../policy/pools.service.ts'
import { aimsOf } from './aims.service.ts'
import { proposalsOf } from './review.service.ts'

interface StoredPending {
  reorderPoint: number
  parLevel: number | null
  waitsFor: string
}

/** How much is enough for one bin, and why. */
export async function readBinPolicy(db: Reader, clock: Clock, actor: Actor, binId: number): Promise<BinPolicy> {
  const { timeZone } = await readHospital(db)
  const view = await viewBin(db, momentOf(clock, timeZone), actor, binId)
  const stored = await currentPolicy(db, binId)
  const row = stored && stored.assignmentId === view.row.assignmentId ? stored : null
  const aims =
    view.row.itemId === null ? null : await aimsOf(db, [{ binId, itemId: view.row.itemId, ved: view.row.ved ?? 'D' }])
  const aim = aims?.get(binId)
  const result = (row?.result ?? null) as PolicyResult | null
  const intervals = await storedIntervals(db, binId)
  const facts = factsOf(row)
  return {
    binId: String(binId),
    mode: view.row.roomMode,
    reorderPoint: view.bin.reorderPoint,
    parLevel: view.bin.parLevel,
    orderQuantity: row?.orderQuantity ?? null,
    since: row?.inForceSince.toISOString() ?? null,
    computed: result === null ? null : { ...result },
    pending: pendingOf((row?.pending ?? null) as StoredPending | null, facts),
    input: row?.input ?? null,
    asOf: row?.asOf.toISOString() ?? null,
    serviceLevel: {
      target: aim?.target ?? 0,
      source: aim?.source ?? 'hospital',
      reviewBy: aim?.reviewBy ?? null,
      reason: aim?.reason ?? null,
      policyReference: aim?.policyReference ?? null,
    },
    intervals: intervals
      .filter((i) => i.assignmentId === view.row.assignmentId)
      .map((i) => ({
        openingOpId: i.openingOpId,
        closingOpId: i.closingOpId,
        openedAt: i.openedAt.toISOString(),
        closedAt: i.closedAt.toISOString(),
        days: i.days,
        quantity: i.quantity,
        used: i.isUsed,
        censored: i.isCensored,
        why: i.why,
      })),
    explanation: result?.explanation ?? [],
    protection: (row?.protection ?? null) as Protection | null,
    proposed: await proposedFor(db, actor, binId),
    sureInForce: facts?.sure ?? null,
    countsKept: facts?.countsKept ?? null,
    demandClass: facts?.demandClass ?? null,
    useStoppedSince: facts?.useStoppedSince ?? null,
    questions: facts?.questions ?? [],
    exclusions: await readExclusions(db, actor, binId, view.row.assignmentId),
    pool: await readPool(db, view.row, facts),
    changes: facts?.changes ?? [],
    leadTimes: facts?.leadTimes ?? null,
    history: (await policyHistory(db, binId, 20)).map((h) => ({
      reorderPoint: h.reorderPoint,
      parLevel: h.parLevel,
      target: h.target,
      source: h.targetSource,
      method: h.method,
      cause: h.cause,
      causes: movedOf(h.moved),
      since: h.inForceSince.toISOString(),
    })),
  }
}

type Moved = BinPolicy['history'][number]['causes']

/** A part of a JSON column comes back as text or as what it holds, by the driver's knowledge of it. */
const movedOf = (moved: unknown): Moved =>
  (typeof moved === 'string' ? (JSON.parse(moved) as Moved | null) : (moved as Moved | null)) ?? []

function pendingOf(stored: StoredPending | null, facts: PolicyFacts | null): BinPolicy['pending'] {
  return stored && { ...stored, causes: facts?.pendingCauses ?? [] }
}

async function proposedFor(db: Reader, actor: Actor, binId: number): Promise<BinPolicy['proposed']> {
  const proposal = (await proposalsOf(db, actor, [binId])).get(binId)
  return proposal ?? null
}
