import type { HolidayGap } from '#shared/calendar/holiday-gap.ts'
import type { OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { exposureOf, usualActivity, type Exposure } from '#shared/demand/activity.ts'
import type { Hospital } from '#shared/contracts/hospital.ts'
import { gapOf } from '#shared/replenishment/gap-need.ts'
import { closedDays, type ClosedDays } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { BinView } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import {
  activityChange,
  bearsOn,
  scopeBinsOf,
  standingChanges,
  type PlannedChangeRow,
} from './planned-changes.service.ts'
import * as repo from './policy.repository.ts'
import { findPool, listPools, listProfiles, type PoolRow } from './pools.repository.ts'

/** What a calculation needs beside the bin's own ledger: read once for one bin or for a whole run. */
export interface World {
  hospital: Hospital
  closed: ClosedDays
  /** Planned changes that bear on a bin, by start. */
  changesOn(view: BinView): PlannedChangeRow[]
  /** How busy the bin is, from weekdays and planned changes. */
  exposureOf(db: Reader, view: BinView): Promise<Exposure>
  poolOf(db: Reader, itemId: number, wardKind: string): Promise<PoolRow | null>
  /** The holiday gap that is near for places of one supplier and ward. */
  gapOf(calendar: OrderCalendar, place: GapPlace, now: number): HolidayGap | null
  /** Days deliveries came after the stated moment, newest first: of the item where enough were seen, else of its supplier. */
  delaysOf(db: Reader, supplierId: number, itemId: number): Promise<number[]>
}

interface GapPlace {
  view: BinView
  supply: repo.SupplyRow | null
}

/** So many deliveries of one item speak for themselves. */
const enoughOfItem = 8

/** @param wide for a run over every bin: pools are read at once */
export async function readWorld(db: Reader, wide = false): Promise<World> {
  const hospital = await readHospital(db)
  const changes = await standingChanges(db)
  const profiles = new Map((await listProfiles(db)).map((p) => [p.wardId, p.weights]))
  const pools = wide ? new Map((await listPools(db)).map((p) => [poolKey(p.itemId, p.wardKind), p])) : null
  const delays = new Map<number, Promise<{ itemId: number; delayDays: number }[]>>()
  const sharers = new Map<string, Promise<number>>()
  const exposures = new Map<string, Exposure>()
  const gaps = new Map<string, HolidayGap | null>()
  const changesOn = (view: BinView): PlannedChangeRow[] => changes.filter((c) => bearsOn(c, view.row))
  return {
    hospital,
    closed: await closedDays(db),
    changesOn,
    async exposureOf(reader, view) {
      const bearing = changesOn(view)
      const key = JSON.stringify([view.row.wardId, bearing.map((c) => c.id), bearing.some(isCases) && view.row.itemId])
      const known = exposures.get(key)
      if (known) return known
      const own = []
      for (const change of bearing) {
        const shared = isCases(change) ? await sharersOf(reader, sharers, change, view.row.itemId!) : 1
        own.push(activityChange(change, hospital.timeZone, shared))
      }
      const usual = usualActivity(hospital.timeZone)
      const weekday = profiles.get(view.row.wardId) ?? usual.weekday
      const made = exposureOf({ ...usual, weekday, changes: own })
      exposures.set(key, made)
      return made
    },
    gapOf(calendar, { view, supply }, now) {
      const key = `${supply?.supplier?.id} ${view.row.wardCalendarId} ${Math.floor(now / gapFreshMs)}`
      const known = gaps.get(key)
      if (known !== undefined) return known
      const gap = gapOf(calendar, now)
      gaps.set(key, gap)
      return gap
    },
    async poolOf(reader, itemId, wardKind) {
      if (!hospital.pooling) return null
      return pools ? (pools.get(poolKey(itemId, wardKind)) ?? null) : findPool(reader, itemId, wardKind)
    },
    async delaysOf(reader, supplierId, itemId) {
      if (!delays.has(supplierId)) delays.set(supplierId, repo.listDelays(reader, supplierId))
      const all = await delays.get(supplierId)!
      const own = all.filter((d) => d.itemId === itemId)
      return (own.length >= enoughOfItem ? own : all).map((d) => d.delayDays)
    },
  }
}

/** A gap looked for this lately is the same gap. */
const gapFreshMs = 60_000
const poolKey = (itemId: number, wardKind: string): string => `${itemId} ${wardKind}`
const isCases = (change: PlannedChangeRow): boolean => change.kind === 'cases'

/** Bins of a change's scope with the same item: they share its cases. */
function sharersOf(
  db: Reader,
  known: Map<string, Promise<number>>,
  change: PlannedChangeRow,
  itemId: number,
): Promise<number> {
  const key = `${change.id} ${itemId}`
  const found = known.get(key) ?? scopeBinsOf(db, change).then((bins) => bins.filter((b) => b.itemId === itemId).length)
  known.set(key, found)
  return found
}
