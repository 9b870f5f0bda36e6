import { learnDemand, type LearnedDemand } from '#shared/demand/learn-demand.ts'
import { settle, type Levels, type Settlement } from '#shared/policy/in-force.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { protectionOf, type Protection } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import { foldedLedger, lockBins, touchBins } from '../counts/levels.service.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { aimsOf, type Aim } from '../review/aims.service.ts'
import { policyInput } from './policy-inputs.ts'
import * as repo from './policy.repository.ts'

/** What made a policy be looked at. */
export type Cause = Settlement['cause']

/** A calculation with what it was made from. */
interface Calculation {
  learned: LearnedDemand
  input: PolicyInput
  /** Method `entered` and no demand where there is nothing to learn from. */
  result: PolicyResult
  protection: Protection
  aim: Aim
}

/** Looks at one bin's policy again; the caller's transaction also holds what caused it. */
export async function recompute(tx: Tx, clock: Clock, binId: number, cause: Cause): Promise<{ changed: boolean }> {
  await lockBins(tx, [binId])
  const hospital = await readHospital(tx)
  const [view] = await viewBins(tx, momentOf(clock, hospital.timeZone), {
    roomIds: null,
    binIds: [binId],
    retired: false,
  })
  if (!view || view.bin.retired || !isComputed(view)) {
    await repo.retirePolicies(tx, binId)
    const main = view?.row.overflowOf ?? null
    return main === null ? { changed: false } : recompute(tx, clock, main, cause)
  }
  const now = clock.now()
  const calculation = await calculate(tx, now, hospital, view)
  await storeIntervals(tx, view, calculation.learned)
  const before = await repo.findCurrent(tx, binId)
  const changed = await store(tx, now, view, calculation, before, cause)
  if (changed) await touchBins(tx, now, [binId], null)
  return { changed }
}

/** Overflow places follow their main place; fixed sets are kept by their own list. */
const isComputed = (view: BinView): boolean =>
  view.row.itemId !== null && view.row.overflowOf === null && view.row.kind !== 'fixed-set'

interface Money {
  timeZone: string
  orderingCost: number
  holdingRatePerYear: number
}

async function calculate(tx: Tx, now: Date, hospital: Money, view: BinView): Promise<Calculation> {
  const learned = await learnFrom(tx, view, now)
  const itemId = view.row.itemId!
  const aim = (await aimsOf(tx, [{ binId: view.row.id, itemId, ved: view.row.ved ?? 'D' }])).get(view.row.id)!
  const [supply] = await repo.listSupply(tx, [itemId])
  const protection = protectionOf(supply?.supplier ?? null, hospital.timeZone, {
    // A place never counted is looked at as if now: its answer is what was entered.
    countedAt: learned.lastCount ? new Date(learned.lastCount.at) : now,
    asOf: now,
    rhythmDays: learned.rhythmDays,
  })
  const input = policyInput({ view, learned, protection, supply: supply ?? null, aim, money: hospital })
  return { learned, aim, input, result: reorderPoint(input), protection }
}

/** The demand process of a place and its overflow places, from what their ledgers hold up to a moment. */
export async function learnFrom(db: Reader, view: BinView, until: Date | null): Promise<LearnedDemand> {
  const rowsOf = async (binId: number, assignmentId: number | null) =>
    (await foldedLedger(db, binId, assignmentId, until)).folded.rows
  const own = await rowsOf(view.row.id, view.row.assignmentId)
  const overflow = []
  for (const place of view.overflow) overflow.push(await rowsOf(place.binId, place.assignmentId))
  const options = { packSize: view.bin.packSize, plannedRhythmDays: view.row.countEveryDays }
  return learnDemand(own, options, overflow)
}

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
  if (known && !settled.changed && sameFigures(known, row, calculation)) {
    await repo.updatePolicy(tx, known.id, {
      confirmedAt: now,
      lowerCounts: lower,
      lastCountOpId: closingCount(calculation),
    })
    return false
  }
  await repo.insertPolicy(tx, {
    ...row,
    binId: view.row.id,
    assignmentId: view.row.assignmentId!,
    isCurrent: true,
    input: calculation.input,
    result: calculation.result,
    protection: calculation.protection,
    cause,
    lowerCounts: settled.changed ? 0 : lower,
    lastCountOpId: closingCount(calculation),
    asOf: now,
    inForceSince: known && !settled.changed ? known.inForceSince : now,
    createdAt: now,
    confirmedAt: now,
  })
  return true
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
  const figures = (r: PolicyResult | null): string =>
    JSON.stringify([r?.reorderPoint, r?.parLevel, r?.orderQuantity, r?.warnings])
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

// In bulk ---------------------------------------------------------------------------------------------------------

/** So many bins are worked out side by side: the database answers one while another is computed. */
const atOnce = 3

interface RunOptions {
  /** Which bins; all of them when left out. */
  binIds?: number[]
  onProgress?: (done: number, of: number) => void
}

/** Many bins, one transaction each, with progress written down; a run cut short is begun again by its job. */
export async function recomputeAll(db: Db, clock: Clock, cause: Cause, options: RunOptions = {}): Promise<number> {
  const hospital = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, hospital.timeZone), { roomIds: null, retired: false })
  const wanted = options.binIds ? new Set(options.binIds) : null
  const waiting = views.map((v) => v.row.id).filter((id) => wanted === null || wanted.has(id))
  const of = waiting.length
  const run = await repo.insertRun(db, { startedAt: clock.now(), cause, bins: of, done: 0, changed: 0 })
  let done = 0
  let changed = 0
  const work = async (): Promise<void> => {
    for (let binId = waiting.shift(); binId !== undefined; binId = waiting.shift()) {
      const id = binId
      if ((await inTransaction(db, (tx) => recompute(tx, clock, id, cause))).changed) changed += 1
      done += 1
      if (done % 50 === 0) await repo.updateRun(db, run, { done, lastBinId: id, changed })
      options.onProgress?.(done, of)
    }
  }
  await Promise.all(Array.from({ length: atOnce }, work))
  await repo.updateRun(db, run, { done, changed, finishedAt: clock.now() })
  return changed
}

export const newestRun = repo.newestRun

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
