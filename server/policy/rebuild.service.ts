import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import { levelDifference } from '../counts/levels.service.ts'
import type { Db } from '../db/client.ts'
import { learnFrom } from './learn.service.ts'
import { allCurrent, intervalKey, intervalRows, storedIntervals } from './policy.service.ts'
import { readWorld, type World } from './world.ts'

/**
 * Computes every projection anew and reports what differs: levels and intervals from the ledger, policies from their
 * stored inputs. Nothing is changed. @returns the number of differences
 */
export async function rebuildAll(db: Db, clock: Clock, say: (line: string) => void): Promise<number> {
  const world = await readWorld(db, true)
  const { timeZone } = world.hospital
  const views = [
    ...(await viewBins(db, momentOf(clock, timeZone), { roomIds: null, retired: false })),
    ...(await viewBins(db, momentOf(clock, timeZone), { roomIds: null, retired: true })),
  ]
  let differences = 0
  const report = (line: string): void => {
    differences += 1
    if (differences <= 50) say(line)
  }
  for (const [i, view] of views.entries()) {
    const level = await levelDifference(db, view.row.id)
    if (level) report(`Place ${view.bin.display}: ${level}`)
    const intervals = await intervalDifference(db, world, view)
    if (intervals) report(`Place ${view.bin.display}: ${intervals}`)
    if ((i + 1) % 100 === 0) say(`  ${i + 1} of ${views.length} places looked at`)
  }
  const policies = await allCurrent(db)
  for (const row of policies) {
    if (row.input === null) continue
    const again = JSON.stringify(reorderPoint(row.input as PolicyInput))
    if (again !== JSON.stringify(row.result))
      report(`Policy of place ${row.binId}: its stored input gives another result`)
  }
  say(
    `${views.length} places and ${policies.length} policies looked at: ${differences === 0 ? 'no difference' : `${differences} differences`}.`,
  )
  return differences
}

/** A bin whose job still waits may lag behind its ledger for a few seconds; after that any difference is a fault. */
async function intervalDifference(db: Db, world: World, view: BinView): Promise<string | null> {
  const stored = (await storedIntervals(db, view.row.id)).filter((r) => r.assignmentId === view.row.assignmentId)
  if (
    view.row.assignmentId === null ||
    view.row.overflowOf !== null ||
    view.row.kind === 'fixed-set' ||
    view.bin.retired
  )
    return null
  const learned = await learnFrom(db, view, null, await world.exposureOf(db, view))
  const fresh = intervalRows(view.row.id, view.row.assignmentId, learned).map(intervalKey)
  const kept = stored.map(intervalKey)
  const same = fresh.length === kept.length && new Set([...fresh, ...kept]).size === fresh.length
  return same ? null : `${kept.length} intervals are stored, the ledger gives ${fresh.length}`
}
