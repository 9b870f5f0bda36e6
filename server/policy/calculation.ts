import { nextCountAt } from '#shared/calendar/counting-calendar.ts'
import { nextSlot } from '#shared/calendar/order-calendar.ts'
import { orderForReopening, type HolidayGap } from '#shared/calendar/holiday-gap.ts'
import { countsKept } from '#shared/demand/counts-kept.ts'
import { demandClass } from '#shared/demand/demand-class.ts'
import { blendLeadTimes } from '#shared/demand/lead-times.ts'
import { useStopped } from '#shared/demand/use-stopped.ts'
import { computedReorderPoints } from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { neededUnits, overGap } from '#shared/replenishment/gap-need.ts'
import {
  calendarOf,
  countingOf,
  placeTimes,
  protectionOf,
  type PlaceTimes,
  type Protection,
} from '../catalogue/calendar.service.ts'
import type { BinView } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import { aimsOf, type Aim } from '../review/aims.service.ts'
import { learnFrom, type Learned } from './learn.service.ts'
import { spanOf, type PlannedChangeRow } from './planned-changes.service.ts'
import type { PolicyFacts } from './policy-facts.ts'
import { policyInput } from './policy-inputs.ts'
import * as repo from './policy.repository.ts'
import type { PoolRow } from './pools.repository.ts'
import type { World } from './world.ts'
import { memberOf, shareOf } from './pool-facts.ts'

const dayMs = 86_400_000

/** Everything a bin's calculation is made from, before the calculation itself. */
export interface Prepared {
  /** The moment it was read at. */
  at: Date
  view: BinView
  learned: Learned
  input: PolicyInput
  protection: Protection
  aim: Aim
  pool: PoolRow | null
  supply: repo.SupplyRow | null
  times: PlaceTimes
  /** Deliveries seen. */
  delays: number[]
  /** The holiday gap that is near, with the calculation of what should stand there before it. */
  ahead: { gap: HolidayGap; input: PolicyInput } | null
}

/** A calculation with what it was made from. */
export interface Calculation extends Prepared {
  /** Method `entered` and no demand where there is nothing to learn from. */
  result: PolicyResult
  facts: Omit<PolicyFacts, 'moved' | 'pendingCauses' | 'sure'>
}

/** Reads and learns what a calculation needs. */
export async function prepare(db: Reader, now: Date, world: World, view: BinView): Promise<Prepared> {
  const itemId = view.row.itemId!
  const exposure = await world.exposureOf(db, view)
  const learned = await learnFrom(db, view, now, exposure)
  const aim = (await aimsOf(db, [{ binId: view.row.id, itemId, ved: view.row.ved ?? 'D' }])).get(view.row.id)!
  const supply = (await repo.listSupply(db, [itemId]))[0] ?? null
  const supplier = supply?.supplier ?? null
  const times = placeTimes(world.closed, supplier, view.row)
  const protection = protectionOf(
    supplier,
    world.hospital.timeZone,
    {
      // A place never counted is looked at as if now: its answer is what was entered.
      countedAt: learned.lastCount ? new Date(learned.lastCount.at) : now,
      asOf: now,
      rhythmDays: learned.rhythmDays,
    },
    times,
  )
  const delays = supplier ? await world.delaysOf(db, supplier.id, itemId) : []
  // A place that was never counted keeps what was entered; its peers help from the first count on.
  const pool = learned.lastCount ? await world.poolOf(db, itemId, view.row.wardKind) : null
  const exposed = exposure.between(Date.parse(protection.countedAt), Date.parse(protection.nextArrival))
  const input = policyInput({
    view,
    learned,
    protection,
    plannedChange: world.changesOn(view).some((c) => fallsInto(c, protection, world)),
    countOverdue: learned.lastCount !== null && dueCount(learned, world, times) < now.getTime(),
    exposureAhead: exposed.days + (learned.basePerDay === null ? 0 : exposed.extraUnits / learned.basePerDay),
    observedDays: blendLeadTimes(
      delays,
      { meanDays: protection.leadMeanDays, sdDays: supplier?.leadTimeSd ?? 0 },
      aim.target,
    ),
    pool,
    supply,
    aim,
    money: world.hospital,
  })
  const gap = gapNear(now, world, { view, supply, times })
  const ahead = gap && { gap, input: overGap(input, Date.parse(protection.countedAt), gap.nextArrival) }
  return { at: now, view, learned, input, protection, aim, pool, supply, times, delays, ahead }
}

/**
 * Adds the result, and what else is worth saying about it.
 *
 * @param gapPoint reorder point of `ahead.input`, where that was worked out beforehand
 */
export function complete(
  now: Date,
  world: World,
  prepared: Prepared,
  result: PolicyResult,
  gapPoint: number | null = null,
): Calculation {
  const { learned, pool, view } = prepared
  const changes = world.changesOn(view)
  const from = now.getTime()
  const stopped = useStopped(learned.intervals)
  return {
    ...prepared,
    result,
    facts: {
      countsKept: countsKeptOf(from, world, prepared),
      demandClass: demandClass(learned.forPolicy.filter(isUsed).map(asPeriod)),
      useStoppedSince: stopped && iso(stopped.since),
      questions: learned.questions.map((q) => ({ ...q, from: iso(q.from), to: iso(q.to) })),
      pool: pool && learned.lastCount ? { basis: pool.basis, ownShare: shareOf(pool, prepared.input, result) } : null,
      changes: changes.filter((c) => matters(c, prepared, world)).map(changeFact),
      leadTimes:
        prepared.delays.length > 0
          ? { seen: prepared.delays.length, statedDays: prepared.protection.leadMeanDays }
          : null,
      closed: closureOf(from, world, prepared, changes),
      gap: gapFact(world, prepared, result, gapPoint),
      basePerDay: learned.intervals.some((i) => i.used) ? learned.basePerDay : null,
      rhythmDays: learned.rhythmDays,
      member: memberOf(prepared.input, result),
    },
  }
}

type LearntInterval = Learned['forPolicy'][number]
const isUsed = (i: LearntInterval): boolean => (i.weight ?? 1) > 0
const asPeriod = (i: LearntInterval) => ({ exposureDays: i.exposureDays ?? i.days, quantity: i.quantity })

/** Null before there were two counts: one alone has kept no rhythm. */
function countsKeptOf(now: number, world: World, { learned, view, times }: Prepared): PolicyFacts['countsKept'] {
  const first = learned.intervals[0]
  if (!first) return null
  const counts = [first.openedAt, ...learned.intervals.map((i) => i.closedAt)]
  const kept = countsKept(counts, view.row.countEveryDays, now, countingOf(world.hospital.timeZone, times))
  return kept.of === 0 ? null : kept
}

const iso = (ms: number): string => new Date(ms).toISOString()

/** When the next count is planned. */
const dueCount = (learned: Learned, world: World, times: PlaceTimes): number =>
  nextCountAt(countingOf(world.hospital.timeZone, times), learned.lastCount!.at, learned.rhythmDays)

function fallsInto(change: PlannedChangeRow, protection: Protection, world: World): boolean {
  const { from, to } = spanOf(change, world.hospital.timeZone)
  return from < Date.parse(protection.nextArrival) && (to === null || to > Date.parse(protection.countedAt))
}

/** Until the next arrival but one, and one more stretch as long: a change beyond that is not of this place's concern yet. */
function matters(change: PlannedChangeRow, { protection }: Prepared, world: World): boolean {
  const { from, to } = spanOf(change, world.hospital.timeZone)
  const horizon = Date.parse(protection.nextArrival) + protection.days * dayMs
  return from <= horizon && (to === null || to > Date.parse(protection.countedAt))
}

const changeFact = (c: PlannedChangeRow): PolicyFacts['changes'][number] => ({
  id: String(c.id),
  name: c.name,
  kind: c.kind,
  startsOn: c.startsOn,
  endsOn: c.endsOn,
  entered: c.kind === 'factor' ? c.factor : null,
  seen: c.kind === 'factor' ? c.seenFactor : null,
})

/** The closure that is on or comes next, and from when on flags serve its end. */
function closureOf(
  now: number,
  world: World,
  { supply, times }: Prepared,
  changes: PlannedChangeRow[],
): PolicyFacts['closed'] {
  const spans = changes
    .filter((c) => c.kind === 'closed')
    .map((c) => spanOf(c, world.hospital.timeZone))
    .filter((s) => s.to === null || s.to > now)
    .sort((a, b) => a.from - b.from)
  const first = spans[0]
  if (!first) return null
  // Closures that touch are one.
  let until = first.to
  for (const s of spans) if (until !== null && s.from <= until) until = s.to === null ? null : Math.max(until, s.to)
  const flagsFrom = until === null ? null : flagsBefore(until, world, supply, times)
  return { from: iso(first.from), until: until === null ? null : iso(until), flagsFrom }
}

/** From the slot before the last order that still comes by the reopening on, that order is the next one. */
function flagsBefore(until: number, world: World, supply: Prepared['supply'], times: PlaceTimes): string {
  const calendar = calendarOf(supply?.supplier ?? null, world.hospital.timeZone, times)
  if ('leadDays' in calendar) return iso(until - (calendar.leadDays + 1) * dayMs)
  const order = orderForReopening(calendar, until)
  if (!order) return iso(until)
  let before = order.orderBy - 14 * dayMs
  for (let at = nextSlot(calendar, before); at < order.orderBy; at = nextSlot(calendar, at, true)) before = at
  return iso(before + 1)
}

function gapNear(
  now: Date,
  world: World,
  { view, supply, times }: Pick<Prepared, 'view' | 'supply' | 'times'>,
): HolidayGap | null {
  const calendar = calendarOf(supply?.supplier ?? null, world.hospital.timeZone, times)
  return 'leadDays' in calendar ? null : world.gapOf(calendar, { view, supply }, now.getTime())
}

/** What should stand there before a holiday gap, where that is more than the reorder point. */
function gapFact(world: World, { ahead }: Prepared, result: PolicyResult, gapPoint: number | null): PolicyFacts['gap'] {
  if (ahead === null || result.demand === null || result.reorderPoint === null) return null
  const level = neededUnits(ahead.input, gapPoint ?? computedReorderPoints([ahead.input])[0] ?? null)
  if (level <= result.reorderPoint) return null
  return { level, orderBy: iso(ahead.gap.lastOrderBy), name: world.closed.nameOf(ahead.gap.dates) }
}
