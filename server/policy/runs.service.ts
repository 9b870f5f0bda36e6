import type { PolicyResult } from '#shared/policy/policy-result.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins } from '../counts/bin-view.service.ts'
import type { Db, Reader } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { prepare, type Prepared } from './calculation.ts'
import { isComputed, recompute, type Cause, type Ready } from './policy.service.ts'
import * as repo from './policy.repository.ts'
import { freezeShared } from './pools.service.ts'
import { onThisThread, startPolicyWorkers, type PolicyWorkers } from './policy-workers.ts'
import { readWorld, type World } from './world.ts'

/** Bins read together, worked out in the workers, and written one by one. */
const chunkSize = 48
/** Fewer bins than this are done before a thread has started. */
const worthThreads = 150
/** So many bins are read or written side by side: the database answers one while another is looked at. */
const atOnce = 3

interface RunOptions {
  /** Which bins; all of them when left out. */
  binIds?: number[]
  /** A run of this cause begun since then and cut short is gone on with, where it stopped. */
  resumeSince?: Date
  /** Nobody else writes meanwhile: a demo being loaded. */
  isAlone?: boolean
  onProgress?: (done: number, of: number) => void
}

/**
 * Works out many bins, one transaction each, in the order of their ids and with progress written down, so that a run
 * that was cut short goes on where it stopped and no bin is ever left with half a policy.
 *
 * A night's run first freezes what places teach each other. Results come from worker threads; each is used only while
 * nothing was written to its bin since it was read, else it is worked out anew under the lock.
 * @returns how many bins changed, over all parts of the run
 */
export async function recomputeAll(db: Db, clock: Clock, cause: Cause, options: RunOptions = {}): Promise<number> {
  const open = options.resumeSince ? await repo.findOpenRun(db, cause, options.resumeSince) : null
  if (cause === 'nightly' && open === null) await freezeShared(db, clock)
  const world = await readWorld(db, true)
  const wanted = options.binIds ? new Set(options.binIds) : null
  const ids = (await repo.listLiveBins(db)).filter((id) => wanted === null || wanted.has(id))
  const left = ids.filter((id) => open?.lastBinId == null || id > open.lastBinId)
  const of = ids.length
  let done = of - left.length
  let changed = open?.changed ?? 0
  const run = open?.id ?? (await repo.insertRun(db, { startedAt: clock.now(), cause, bins: of, done: 0, changed: 0 }))
  const workers = left.length >= worthThreads ? startPolicyWorkers() : onThisThread
  try {
    for (let i = 0; i < left.length; i += chunkSize) {
      const chunk = left.slice(i, i + chunkSize)
      changed += await workOut(db, clock, { world, cause, ids: chunk, isAlone: options.isAlone ?? false }, workers)
      done += chunk.length
      await repo.updateRun(db, run, { bins: of, done, changed, lastBinId: chunk.at(-1)! })
      options.onProgress?.(done, of)
    }
  } finally {
    await workers.stop()
  }
  await repo.updateRun(db, run, { done: of, changed, finishedAt: clock.now() })
  return changed
}

interface Part {
  world: World
  cause: Cause
  ids: number[]
  isAlone: boolean
}

async function workOut(db: Db, clock: Clock, part: Part, workers: PolicyWorkers): Promise<number> {
  const prepared: Prepared[] = []
  const views = await viewBins(db, momentOf(clock, part.world.hospital.timeZone), {
    roomIds: null,
    binIds: part.ids,
    retired: false,
  })
  await sideBySide(
    views.filter((v) => !v.bin.retired && isComputed(v)),
    async (view) => {
      prepared.push(await prepare(db, clock.now(), part.world, view))
    },
  )
  const results = await resultsOf(db, prepared, workers)
  const overGap = prepared.filter((p) => p.ahead !== null)
  const points = await workers.points(overGap.map((p) => p.ahead!.input))
  const gapPoints = new Map(overGap.map((p, i) => [p, points[i] ?? null]))
  const ready = new Map<number, Ready>(
    prepared.map((p, i) => [
      p.view.row.id,
      { prepared: p, result: results[i]!, gapPoint: gapPoints.get(p) ?? null, isAlone: part.isAlone },
    ]),
  )
  let changed = 0
  await sideBySide(part.ids, async (id) => {
    const answer = await inTransaction(db, (tx) =>
      recompute(tx, clock, id, part.cause, part.world, ready.get(id) ?? null),
    )
    if (answer.changed) changed += 1
  })
  return changed
}

/** Only what changed is worked out anew: equal inputs give equal results. */
async function resultsOf(db: Db, prepared: Prepared[], workers: PolicyWorkers): Promise<PolicyResult[]> {
  const stored = await repo.listWorkedOut(
    db,
    prepared.map((p) => p.view.row.id),
  )
  const known = new Map(stored.map((row) => [row.id, row]))
  const kept = prepared.map((p): PolicyResult | null => {
    const row = p.view.row.policyId === null ? undefined : known.get(p.view.row.policyId)
    return row && JSON.stringify(row.input) === JSON.stringify(p.input) ? (row.result as PolicyResult) : null
  })
  const fresh = await workers.compute(prepared.flatMap((p, i) => (kept[i] ? [] : [p.input])))
  return kept.map((result) => result ?? fresh.shift()!)
}

async function sideBySide<T>(all: readonly T[], work: (one: T) => Promise<void>): Promise<void> {
  const waiting = [...all]
  const worker = async (): Promise<void> => {
    for (let next = waiting.shift(); next !== undefined; next = waiting.shift()) await work(next)
  }
  await Promise.all(Array.from({ length: atOnce }, worker))
}

export const newestRun = repo.newestRun

/** How far the newest run has come. */
export async function readRun(db: Reader) {
  const run = await repo.newestRun(db, null)
  return {
    run: run && {
      startedAt: run.startedAt.toISOString(),
      finishedAt: run.finishedAt?.toISOString() ?? null,
      bins: run.bins,
      done: run.done,
      changed: run.changed,
    },
  }
}
