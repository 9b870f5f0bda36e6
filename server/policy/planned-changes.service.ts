import { DateTime } from 'luxon'
import type { ActivityChange } from '#shared/demand/activity.ts'
import { lastYearFactor } from '#shared/demand/seen-factor.ts'
import type { LastYear, PlannedChange, PlannedChangeKind } from '#shared/contracts/planned-changes.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import { oneAtATime, readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { pageOf } from '../counts/bin-view.service.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { enqueue } from '../jobs/jobs.service.ts'
import { peopleNames } from '../people/people.service.ts'
import * as repo from './planned-changes.repository.ts'

export type { PlannedChangeRow } from './planned-changes.repository.ts'
export const standingChanges = repo.listStanding

/** More bins than this are worked out by one run over all of them. */
const manyBins = 200
const furthestYears = 2

const scopeOf = (row: Pick<repo.PlannedChangeRow, 'wardId' | 'roomId' | 'itemIds'>): repo.Scope => ({
  wardId: row.wardId,
  roomId: row.roomId,
  itemIds: row.itemIds,
})

/** Bins in use a change is about, with what they hold. */
export const scopeBinsOf = (db: Reader, change: repo.PlannedChangeRow) => repo.listScopeBins(db, scopeOf(change))

/** Whether a change is about a bin. */
export const bearsOn = (
  change: Pick<repo.PlannedChangeRow, 'wardId' | 'roomId' | 'itemIds'>,
  bin: { roomId: number; wardId: number; itemId: number | null },
): boolean =>
  (change.roomId === null || change.roomId === bin.roomId) &&
  (change.wardId === null || change.wardId === bin.wardId) &&
  (change.itemIds.length === 0 || (bin.itemId !== null && change.itemIds.includes(bin.itemId)))

const startOfDay = (date: string, zone: string): DateTime => DateTime.fromISO(date, { zone }).startOf('day')

/** First and last moment of a change; without an end it goes on. Epoch ms. */
export const spanOf = (
  change: Pick<repo.PlannedChangeRow, 'startsOn' | 'endsOn'>,
  zone: string,
): { from: number; to: number | null } => ({
  from: startOfDay(change.startsOn, zone).toMillis(),
  to: change.endsOn === null ? null : startOfDay(change.endsOn, zone).plus({ days: 1 }).toMillis(),
})

/**
 * A change as the demand process reads it. Cases are for the whole scope: its bins with the same item share them.
 *
 * @param sharers bins of the scope that hold the same item
 */
export function activityChange(change: repo.PlannedChangeRow, zone: string, sharers: number): ActivityChange {
  const units = change.kind === 'cases' ? (change.unitsPerCase ?? 0) * (change.casesPerDay ?? 0) : 0
  return {
    id: String(change.id),
    ...spanOf(change, zone),
    factor: change.kind === 'closed' ? 0 : change.kind === 'factor' ? (change.usedFactor ?? change.factor ?? 1) : 1,
    extraPerDay: units / Math.max(1, sharers),
    weekdays: [...change.weekdays].map(Number),
  }
}

// For people ------------------------------------------------------------------------------------------------------
export interface ChangeFields {
  name: string
  wardId: string | null
  roomId: string | null
  itemIds: string[]
  kind: PlannedChangeKind
  factor: number | null
  unitsPerCase: number | null
  casesPerDay: number | null
  weekdays: string
  startsOn: string
  endsOn: string | null
  reason: string
}

/** Figures that belong to the kind, and none of another; dates in order. */
function checkFigures(fields: Omit<ChangeFields, 'name' | 'reason' | 'wardId' | 'roomId'>, today: DateTime): void {
  const { kind } = fields
  if (kind === 'factor' && fields.factor === null) throw fieldProblem('/factor', 'say how many times the usual use')
  if (kind === 'factor' && fields.factor === 1) throw fieldProblem('/factor', 'use times 1 changes nothing')
  if (kind === 'cases') {
    if (fields.unitsPerCase === null) throw fieldProblem('/unitsPerCase', 'say how many units one case takes')
    if (fields.casesPerDay === null) throw fieldProblem('/casesPerDay', 'say how many cases a day')
    if (fields.itemIds.length === 0) throw fieldProblem('/itemIds', 'name the items these cases use')
  }
  if (kind === 'closed' && fields.itemIds.length > 0)
    throw fieldProblem('/itemIds', 'a place is closed as a whole: leave the items out')
  if (fields.endsOn !== null && fields.endsOn < fields.startsOn)
    throw fieldProblem('/endsOn', 'the last day cannot be before the first')
  const far = (date: string): boolean =>
    Math.abs(DateTime.fromISO(date, { zone: today.zone }).diff(today).as('years')) > furthestYears
  if (far(fields.startsOn)) throw fieldProblem('/startsOn', 'choose a day within two years of today')
  if (fields.endsOn !== null && far(fields.endsOn))
    throw fieldProblem('/endsOn', 'choose a day within two years, or leave it open')
}

async function checkScope(
  tx: Tx,
  actor: Actor,
  fields: ChangeFields,
): Promise<repo.Scope & { placeWard: number | null }> {
  const wardId = fields.wardId === null ? null : Number(fields.wardId)
  const roomId = fields.roomId === null ? null : Number(fields.roomId)
  if (fields.kind === 'closed' && wardId === null && roomId === null)
    throw fieldProblem('/wardId', 'say which ward or room is closed')
  if (actor.roomIds !== null && (roomId === null || !actor.roomIds.includes(roomId)))
    throw fieldProblem('/roomId', 'choose one of your rooms')
  const place = wardId === null && roomId === null ? null : await repo.findPlace(tx, { wardId, roomId })
  if (roomId !== null && (!place || (wardId !== null && place.wardId !== wardId)))
    throw fieldProblem('/roomId', 'choose a room of this ward that is in use')
  if (wardId !== null && !place) throw fieldProblem('/wardId', 'choose a ward that is in use')
  const itemIds = [...new Set(fields.itemIds.map(Number))]
  if ((await repo.listItemNames(tx, itemIds)).length !== itemIds.length)
    throw fieldProblem('/itemIds', 'one of these items is not known')
  return { wardId: roomId === null ? wardId : null, roomId, itemIds, placeWard: place?.wardId ?? null }
}

export async function createChange(tx: Tx, clock: Clock, actor: Actor, fields: ChangeFields): Promise<PlannedChange> {
  const { timeZone } = await readHospital(tx)
  checkFigures(fields, DateTime.fromJSDate(clock.now(), { zone: timeZone }).startOf('day'))
  const { wardId, roomId, itemIds } = await checkScope(tx, actor, fields)
  const scope = { wardId, roomId, itemIds }
  if (fields.kind !== 'closed' && (await repo.listScopeBins(tx, scope)).length === 0)
    throw fieldProblem('/itemIds', 'no place there holds one of these items')
  await oneAtATime(tx)
  if ((await repo.listStanding(tx)).some((row) => isSame(row, scope, fields)))
    throw problem('already-exists', 'The same change is planned already. Change that one instead.')
  const id = await repo.insertChange(tx, {
    ...scope,
    name: fields.name,
    kind: fields.kind,
    ...figuresOf(fields.kind, fields),
    weekdays: fields.kind === 'cases' ? fields.weekdays : '',
    startsOn: fields.startsOn,
    endsOn: fields.endsOn,
    reason: fields.reason,
    createdBy: actor.id,
    createdAt: clock.now(),
  })
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'planned-change-added',
    subject: 'planned-change',
    subjectId: id,
    after: fields,
    reason: fields.reason,
  })
  await askAgain(tx, clock, scope)
  return readChange(tx, clock, actor, id)
}

/** Twice the same factor would be its square. */
const isSame = (row: repo.PlannedChangeRow, scope: repo.Scope, fields: ChangeFields): boolean =>
  row.roomId === scope.roomId &&
  row.wardId === scope.wardId &&
  row.kind === fields.kind &&
  row.name === fields.name &&
  row.startsOn === fields.startsOn &&
  row.endsOn === fields.endsOn &&
  JSON.stringify([...row.itemIds].sort()) === JSON.stringify([...scope.itemIds].sort())

const figuresOf = (kind: PlannedChangeKind, fields: Pick<ChangeFields, 'factor' | 'unitsPerCase' | 'casesPerDay'>) => ({
  factor: kind === 'factor' ? fields.factor : null,
  unitsPerCase: kind === 'cases' ? fields.unitsPerCase : null,
  casesPerDay: kind === 'cases' ? fields.casesPerDay : null,
})

/** Every bin of the scope is worked out anew. */
async function askAgain(tx: Tx, clock: Clock, scope: repo.Scope): Promise<void> {
  const bins = (await repo.listScopeBins(tx, scope)).map((b) => b.binId)
  if (bins.length > manyBins)
    await enqueue(tx, clock.now(), 'policy-all', { cause: 'planned-change' }, 'policy-all-planned-change')
  else await touchBins(tx, clock.now(), bins, 'planned-change')
}

async function lockedChange(tx: Tx, actor: Actor, id: number): Promise<repo.PlannedChangeRow> {
  const row = await repo.findChange(tx, id)
  const isHis = actor.roomIds === null || (row?.roomId != null && actor.roomIds.includes(row.roomId))
  if (!row || !isHis) throw problem('not-found')
  return row
}

type Change = Partial<Omit<ChangeFields, 'wardId' | 'roomId' | 'itemIds' | 'kind'>>

export async function updateChange(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: Change,
): Promise<PlannedChange> {
  const before = await lockedChange(tx, actor, id)
  if (before.endedAt) throw problem('already-decided', 'This change was taken back. Plan a new one.')
  const given = Object.fromEntries(Object.entries(input).filter(([, value]) => value !== undefined)) as Change
  const after = { ...before, ...given, itemIds: before.itemIds.map(String) }
  const { timeZone } = await readHospital(tx)
  const today = DateTime.fromJSDate(clock.now(), { zone: timeZone }).startOf('day')
  checkFigures(after, today)
  await repo.updateChange(tx, id, {
    name: after.name,
    ...figuresOf(before.kind, after),
    weekdays: before.kind === 'cases' ? after.weekdays : '',
    startsOn: after.startsOn,
    endsOn: after.endsOn,
    reason: after.reason,
    // What was seen belonged to the factor as it stood.
    ...(given.factor === undefined || given.factor === before.factor
      ? {}
      : { seenFactor: null, seenIntervals: 0, usedFactor: null }),
  })
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'planned-change-changed',
    subject: 'planned-change',
    subjectId: id,
    before,
    after: input,
    reason: after.reason,
  })
  await askAgain(tx, clock, scopeOf(before))
  return readChange(tx, clock, actor, id)
}

export async function takeBack(tx: Tx, clock: Clock, actor: Actor, id: number, reason: string): Promise<PlannedChange> {
  const before = await lockedChange(tx, actor, id)
  if (before.endedAt) throw problem('already-decided', 'This change was taken back already.')
  await repo.updateChange(tx, id, { endedAt: clock.now(), endedBy: actor.id })
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'planned-change-taken-back',
    subject: 'planned-change',
    subjectId: id,
    before,
    reason,
  })
  await askAgain(tx, clock, scopeOf(before))
  return readChange(tx, clock, actor, id)
}

async function readChange(db: Reader, clock: Clock, actor: Actor, id: number): Promise<PlannedChange> {
  const row = await repo.findChange(db, id)
  return (await toChanges(db, clock, actor, row ? [row] : []))[0]!
}

interface ListQuery {
  show: 'open' | 'all'
  page: number
  pageSize: number
}

const order: Record<PlannedChange['state'], number> = { now: 0, ahead: 1, past: 2, 'taken-back': 3 }

export async function listChanges(db: Reader, clock: Clock, actor: Actor, query: ListQuery) {
  const { timeZone } = await readHospital(db)
  const today = DateTime.fromJSDate(clock.now(), { zone: timeZone }).toISODate()
  const rows = await repo.listChanges(db, query.show === 'open' ? today : null)
  const mine = rows.filter((r) => actor.roomIds === null || (r.roomId !== null && actor.roomIds.includes(r.roomId)))
  const all = await toChanges(db, clock, actor, mine)
  return pageOf(
    all.sort((a, b) => order[a.state] - order[b.state]),
    query,
  )
}

async function toChanges(
  db: Reader,
  clock: Clock,
  actor: Actor,
  rows: repo.PlannedChangeRow[],
): Promise<PlannedChange[]> {
  const { timeZone, name } = await readHospital(db)
  const today = DateTime.fromJSDate(clock.now(), { zone: timeZone }).toISODate() ?? ''
  const people = await peopleNames(
    db,
    rows.map((r) => r.createdBy),
  )
  const names = new Map(
    (
      await repo.listItemNames(
        db,
        rows.flatMap((r) => r.itemIds),
      )
    ).map((i) => [i.id, i.name]),
  )
  const answer: PlannedChange[] = []
  for (const row of rows) {
    const place = row.wardId === null && row.roomId === null ? null : await repo.findPlace(db, row)
    const person = people.get(row.createdBy)
    const seesName = row.createdBy === actor.id || actor.role === 'coordinator'
    answer.push({
      id: String(row.id),
      name: row.name,
      wardId: row.wardId === null ? null : String(row.wardId),
      roomId: row.roomId === null ? null : String(row.roomId),
      itemIds: row.itemIds.map(String),
      kind: row.kind,
      factor: row.factor,
      unitsPerCase: row.unitsPerCase,
      casesPerDay: row.casesPerDay,
      weekdays: row.weekdays,
      startsOn: row.startsOn,
      endsOn: row.endsOn,
      reason: row.reason,
      placeName: place?.name ?? name,
      itemNames: row.itemIds.map((id) => names.get(id) ?? ''),
      bins: (await repo.listScopeBins(db, scopeOf(row))).length,
      state: stateOf(row, today),
      seen:
        row.kind === 'factor' && row.usedFactor !== null
          ? { factor: row.seenFactor, intervals: row.seenIntervals, used: row.usedFactor }
          : null,
      byName: (seesName ? person?.name : person?.role) ?? '',
      createdAt: row.createdAt.toISOString(),
    })
  }
  return answer
}

function stateOf(row: repo.PlannedChangeRow, today: string): PlannedChange['state'] {
  if (row.endedAt) return 'taken-back'
  if (row.startsOn > today) return 'ahead'
  return row.endsOn !== null && row.endsOn < today ? 'past' : 'now'
}

const beforeDays = 56

/** The factor of the same days a year ago: use a day then over use a day in the eight weeks before them. */
export async function readLastYear(
  db: Reader,
  actor: Actor,
  query: { wardId?: string; roomId?: string; itemId?: string; startsOn: string; endsOn: string },
): Promise<LastYear> {
  const { timeZone } = await readHospital(db)
  const from = startOfDay(query.startsOn, timeZone).minus({ years: 1 })
  const to = startOfDay(query.endsOn, timeZone).minus({ years: 1 }).plus({ days: 1 })
  if (to <= from) throw fieldProblem('/endsOn', 'the last day cannot be before the first')
  const roomId = query.roomId === undefined ? null : Number(query.roomId)
  if (actor.roomIds !== null && (roomId === null || !actor.roomIds.includes(roomId))) throw problem('not-found')
  const scope = {
    wardId: query.wardId === undefined ? null : Number(query.wardId),
    roomId,
    itemIds: query.itemId === undefined ? [] : [Number(query.itemId)],
  }
  const start = from.minus({ days: beforeDays })
  const rows = await repo.listScopeIntervals(db, scope, start.toJSDate(), to.toJSDate())
  const within = (a: DateTime, b: DateTime) =>
    rows
      .filter((r) => r.openedAt.getTime() >= a.toMillis() && r.closedAt.getTime() <= b.toMillis())
      .map((r) => ({ quantity: r.quantity, exposureDays: r.days }))
  const inside = within(from, to)
  return {
    factor: lastYearFactor({ inside, before: within(start, from) }),
    intervals: inside.length,
    from: from.toISODate() ?? '',
    to: to.minus({ days: 1 }).toISODate() ?? '',
  }
}
