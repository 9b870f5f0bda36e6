import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { CauseOfMove } from '#shared/contracts/policy.ts'
import { settle, type Levels, type Settlement } from '#shared/policy/in-force.ts'
import { protectionCdf } from '#shared/policy/protection-cdf.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { splitCauses } from '#shared/policy/split-causes.ts'
import type { LearnedDemand } from '#shared/demand/learn-demand.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import { lockBins, touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import { complete, prepare, type Calculation, type Prepared } from './calculation.ts'
import type { PolicyFacts } from './policy-facts.ts'
import * as repo from './policy.repository.ts'
import { readWorld, type World } from './world.ts'

/** What made a policy be looked at. */
export type Cause = Settlement['cause']

/** A result worked out beforehand, with what it was made from. */
export interface Ready {
  prepared: Prepared
  result: PolicyResult
  /** Reorder point over a holiday gap that is near. */
  gapPoint: number | null
  /** Since then nobody else has written: a demo being loaded. */
  isAlone: boolean
}

/**
 * Looks at one bin's policy again; the caller's transaction also holds what caused it.
 *
 * @param ready used when neither the bin's ledger nor its policy has been written since it was prepared
 */
export async function recompute(
  tx: Tx,
  clock: Clock,
  binId: number,
  cause: Cause,
  world: World | null = null,
  ready: Ready | null = null,
): Promise<{ changed: boolean }> {
  const foldedAt = await lockBins(tx, [binId])
  const before = await repo.findCurrent(tx, binId)
  if (ready !== null && isFresh(ready, foldedAt, before)) {
    const calculation = complete(ready.prepared.at, world!, ready.prepared, ready.result, ready.gapPoint)
    return keep(tx, ready.prepared.at, calculation, before, cause)
  }
  const around = world ?? (await readWorld(tx))
  const [view] = await viewBins(tx, momentOf(clock, around.hospital.timeZone), {
    roomIds: null,
    binIds: [binId],
    retired: false,
  })
  if (!view || view.bin.retired || !isComputed(view)) {
    await repo.retirePolicies(tx, binId)
    const main = view?.row.overflowOf ?? null
    return main === null ? { changed: false } : recompute(tx, clock, main, cause, world)
  }
  const now = clock.now()
  const prepared = await prepare(tx, now, around, view)
  return keep(tx, now, complete(now, around, prepared, reorderPoint(prepared.input)), before, cause)
}

const isFresh = ({ prepared, isAlone }: Ready, foldedAt: number, before: repo.PolicyRow | null): boolean =>
  isAlone ||
  (foldedAt < prepared.at.getTime() &&
    (before?.id ?? null) === prepared.view.row.policyId &&
    (before === null || before.asOf < prepared.at))

async function keep(
  tx: Tx,
  now: Date,
  calculation: Calculation,
  before: repo.PolicyRow | null,
  cause: Cause,
): Promise<{ changed: boolean }> {
  const { view } = calculation
  await storeIntervals(tx, view, calculation.learned)
  const changed = await store(tx, now, view, calculation, before, cause)
  if (changed) await touchBins(tx, now, [view.row.id], null)
  return { changed }
}

/** Overflow places follow their main place; fixed sets are kept by their own list. */
export const isComputed = (view: BinView): boolean =>
  view.row.itemId !== null && view.row.overflowOf === null && view.row.kind !== 'fixed-set'

const enteredLevels = (view: BinView): Levels => ({
  reorderPoint: view.row.enteredReorderPoint,
  parLevel: view.row.enteredPar,
  orderQuantity:
    view.row.enteredPar !== null && view.row.enteredReorderPoint !== null
      ? Math.max(0, view.row.enteredPar - view.row.enteredReorderPoint)
      : null,
})

/** The count that closed the last interval: recounts within half a day are no counts of their own. */
const closingCount = (calculation: Calculation): string | null =>
  calculation.learned.intervals.at(-1)?.closingOpId ?? null

/** Counts in a row whose calculation stood below the figure in force. */
function lowerCounts(before: repo.PolicyRow | null, calculation: Calculation): number {
  const computed = calculation.result.reorderPoint
  if (!before || computed === null || before.reorderPoint === null || computed >= before.reorderPoint) return 0
  const isNewCount = before.lastCountOpId !== closingCount(calculation)
  return isNewCount ? before.lowerCounts + 1 : before.lowerCounts
}

async function store(
  tx: Tx,
  now: Date,
  view: BinView,
  calculation: Calculation,
  before: repo.PolicyRow | null,
  cause: Cause,
): Promise<boolean> {
  const sameAssignment = before !== null && before.assignmentId === view.row.assignmentId
  const known = sameAssignment ? before : null
  const lower = lowerCounts(known, calculation)
  const settled = settle({
    mode: view.row.roomMode,
    inForce: known
      ? { reorderPoint: known.reorderPoint, parLevel: known.parLevel, orderQuantity: known.orderQuantity }
      : null,
    computed: calculation.result,
    entered: enteredLevels(view),
    cause,
    lowerCounts: lower,
  })
  const row = {
    mode: view.row.roomMode,
    method: calculation.result.method,
    target: calculation.aim.target,
    targetSource: calculation.aim.source,
    pending: settled.pending,
    reorderPoint: settled.reorderPoint,
    parLevel: settled.parLevel,
    orderQuantity: settled.orderQuantity,
  }
  const fresh = {
    input: calculation.input,
    result: calculation.result,
    protection: calculation.protection,
    lastCountOpId: closingCount(calculation),
    asOf: now,
    confirmedAt: now,
  }
  const basis = known?.basisId == null ? null : await repo.findBasis(tx, known.basisId)
  const sure = sureAt(calculation, settled.reorderPoint)
  const pendingCauses = settled.pending ? causesOf(basis, calculation, known?.reorderPoint ?? null) : []
  if (known && !settled.changed && sameFigures(known, row, calculation)) {
    const before = factsOf(known)
    const facts = { ...calculation.facts, sure, pendingCauses, moved: before?.moved ?? [] }
    await repo.updatePolicy(tx, known.id, { ...fresh, facts, lowerCounts: lower })
    return shownElsewhere(before) !== shownElsewhere(facts)
  }
  const isCalculated = settled.reorderPoint !== null && settled.reorderPoint === calculation.result.reorderPoint
  const moved = known && settled.changed && isCalculated ? causesOf(basis, calculation, known.reorderPoint) : []
  const id = await repo.insertPolicy(tx, {
    ...row,
    ...fresh,
    facts: { ...calculation.facts, sure, pendingCauses, moved },
    binId: view.row.id,
    assignmentId: view.row.assignmentId!,
    isCurrent: true,
    basisId: settled.changed ? null : (known?.basisId ?? null),
    cause,
    lowerCounts: settled.changed ? 0 : lower,
    inForceSince: known && !settled.changed ? known.inForceSince : now,
    createdAt: now,
  })
  if (settled.changed && isCalculated) await repo.updatePolicy(tx, id, { basisId: id })
  return true
}

export const factsOf = (row: Pick<repo.PolicyRow, 'facts'> | null): PolicyFacts | null =>
  (row?.facts ?? null) as PolicyFacts | null

/** What of the facts other screens and phones show. */
const shownElsewhere = (facts: PolicyFacts | null): string =>
  JSON.stringify([facts?.closed ?? null, facts?.gap ?? null])

/** Estimated chance that one delivery cycle does not run out when orders are placed at this level. */
function sureAt({ input, result }: Calculation, level: number | null): number | null {
  if (level === null || result.demand === null) return null
  return level === result.reorderPoint ? result.achieved : (protectionCdf(input)?.(level) ?? null)
}

/** How much each group of inputs moved the figure away from the one in force. */
function causesOf(
  basis: Pick<repo.PolicyRow, 'input' | 'facts'> | null,
  calculation: Calculation,
  inForce: number | null,
): CauseOfMove[] {
  const computed = calculation.result.reorderPoint
  if (computed === null) return []
  if (basis?.input == null) return [{ what: 'entered', units: computed - (inForce ?? 0) }]
  return namedCauses(basis.input as PolicyInput, factsOf(basis)?.rhythmDays ?? null, calculation)
}

/** Half a day more or less between counts is the same rhythm. */
const sameRhythm = 0.5
const daysToCover = (input: PolicyInput): number => input.leadTime.meanDays + (input.reviewPeriodDays ?? 0)

/**
 * The parts of a move as people know them. Review period and lead time both move with the day a count falls on; where
 * the rhythm of counting is the same they are one: the days to cover.
 */
function namedCauses(before: PolicyInput, rhythm: number | null, { input, facts }: Calculation): CauseOfMove[] {
  const isPlanned = before.situation?.plannedChange === true || input.situation?.plannedChange === true
  // Without a planned change it is the weekdays in the days to cover that make them busier or quieter.
  const parts = splitCauses(before, input).map((p): CauseOfMove =>
    p.what === 'planned-change' && !isPlanned ? { ...p, what: 'weekdays' } : p,
  )
  if (rhythm !== null && Math.abs(facts.rhythmDays - rhythm) >= sameRhythm)
    return parts.map((p) => (p.what === 'rhythm' ? { ...p, from: rhythm, to: facts.rhythmDays } : p))
  const isDays = (p: CauseOfMove): boolean => p.what === 'rhythm' || p.what === 'delivery' || p.what === 'weekdays'
  const units = parts.filter(isDays).reduce((sum, p) => sum + p.units, 0)
  const others = parts.filter((p) => !isDays(p))
  if (units === 0) return others
  const days = { what: 'days', units, from: daysToCover(before), to: daysToCover(input) }
  const at = parts.findIndex(isDays)
  return [...others.slice(0, at), days, ...others.slice(at)]
}

interface Figures {
  mode: string
  method: string
  target: number
  targetSource: string
  pending: unknown
}

/** A row is written only when figures, target, method or mode change. */
function sameFigures(known: repo.PolicyRow, row: Figures, calculation: Calculation): boolean {
  const result = known.result as PolicyResult | null
  const figures = (r: PolicyResult | null): string => JSON.stringify([r?.reorderPoint, r?.parLevel, r?.orderQuantity])
  return (
    known.mode === row.mode &&
    known.method === row.method &&
    known.target === row.target &&
    known.targetSource === row.targetSource &&
    JSON.stringify(known.pending) === JSON.stringify(row.pending) &&
    figures(result) === figures(calculation.result)
  )
}

/** The rows the projection should hold. */
export function intervalRows(binId: number, assignmentId: number, learned: LearnedDemand): repo.NewInterval[] {
  return learned.intervals.map((i) => ({
    binId,
    assignmentId,
    openingOpId: i.openingOpId,
    closingOpId: i.closingOpId,
    openedAt: new Date(i.openedAt),
    closedAt: new Date(i.closedAt),
    days: i.days,
    exposureDays: i.exposureDays,
    quantity: i.quantity,
    isCensored: i.censored,
    isUsed: i.used,
    why: i.why,
  }))
}

/** Doubles come back from the database with another last digit; a millionth of a day is no difference. */
const micro = (days: number): number => Math.round(days * 1e6)

/** What makes two interval rows equal. */
export const intervalKey = (row: repo.NewInterval): string =>
  JSON.stringify([
    row.assignmentId,
    row.openingOpId,
    row.closingOpId,
    row.openedAt.getTime(),
    row.closedAt.getTime(),
    micro(row.days),
    micro(row.exposureDays),
    row.quantity,
    row.isCensored,
    row.isUsed,
    row.why,
  ])

/** Only what changed is written: a new count adds one row and leaves a hundred alone. */
async function storeIntervals(tx: Tx, view: BinView, learned: LearnedDemand): Promise<void> {
  const stored = await repo.listIntervals(tx, view.row.id)
  const wanted = new Map(intervalRows(view.row.id, view.row.assignmentId!, learned).map((r) => [intervalKey(r), r]))
  const stale = stored.filter((row) => !wanted.delete(intervalKey(row))).map((row) => row.id)
  await repo.replaceIntervals(tx, stale, [...wanted.values()])
}

// For those who read ----------------------------------------------------------------------------------------------

/** Estimated demand of every bin that has a calculation. */
export async function demandOf(db: Reader): Promise<Map<number, { meanPerDay: number; dispersion: number }>> {
  const rows = await repo.listResults(db)
  return new Map(
    rows.flatMap((row) => {
      const demand = (row.result as PolicyResult | null)?.demand
      return demand ? [[row.binId, { meanPerDay: demand.meanPerDay, dispersion: demand.dispersion ?? 1 }] as const] : []
    }),
  )
}

/** Warnings of each bin's calculation. */
export async function warningsOf(db: Reader): Promise<Map<number, string[]>> {
  const rows = await repo.listResults(db)
  return new Map(rows.map((row) => [row.binId, (row.result as PolicyResult | null)?.warnings ?? []]))
}

/** Bins with stretches of use that wait for a person's word, and how many. */
export async function askedPlaces(db: Reader): Promise<Map<number, number>> {
  return new Map((await repo.listAsked(db)).map((row) => [row.binId, row.questions]))
}

/** What a bin's figures come to, for those who add up. */
export const currentFigures = repo.listFigures

export const intervalCounts = repo.countIntervals
export const cycleCounts = repo.countCycles
export const currentPolicy = repo.findCurrent
export const policyHistory = repo.listHistory
export const storedIntervals = repo.listIntervals
export const allCurrent = repo.listCurrent

/** Reorder points in force that moved since a moment: first figure, last figure, why. */
export async function movedSince(db: Reader, since: Date) {
  const rows = await repo.listMovedSince(db, since)
  const last = new Map(rows.map((r) => [r.binId, r]))
  const before = new Map(
    (await repo.listPointsBefore(db, [...last.keys()], since)).map((r) => [r.binId, r.reorderPoint]),
  )
  return [...last.values()].flatMap((row) => {
    const from = before.get(row.binId)
    if (from === undefined || row.reorderPoint === null || from === row.reorderPoint) return []
    return [{ binId: row.binId, from, to: row.reorderPoint, at: row.at, cause: row.cause }]
  })
}
