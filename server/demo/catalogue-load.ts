import { randomBytes } from 'node:crypto'
import { DateTime } from 'luxon'
import { audit } from '../audit/audit.service.ts'
import { createCalendar, updateCalendar } from '../catalogue/calendars.service.ts'
import { createHospital } from '../catalogue/hospital.service.ts'
import { createItem, updateItem } from '../catalogue/items.service.ts'
import { createRoom, createSupplier, createWard } from '../catalogue/places.service.ts'
import type { Clock } from '../clock.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { createUser } from '../people/people.service.ts'
import { binPlans, storyPlan, type BinPlan } from './bin-plan.ts'
import { calendarName, holidaysBetween } from './catalogue/holidays.ts'
import { items, lookalikes } from './catalogue/items.ts'
import { people } from './catalogue/people.ts'
import { hospital, rooms, suppliers, wards } from './catalogue/places.ts'
import { insertBins, insertFloor, insertOverride } from './demo.repository.ts'
import { story, type StoryPlace } from './story.ts'

interface Load {
  tx: Tx
  /** Stands at the beginning of the history. */
  clock: Clock
  /** When the history ends. */
  to: Date
  /** By staff code. */
  passwords: ReadonlyMap<string, string>
  say: (line: string) => void
}

/** Everything that stands before the first count, through the same functions as the forms. One transaction. */
export async function loadCatalogue(load: Load): Promise<void> {
  const { tx, clock, say } = load
  await createHospital(tx, clock, { ...hospital, calendarId: await createHolidays(load) })
  const roomIds = new Map<string, string>()
  const administrator = await createPeople(load, (p) => p.role === 'administrator', roomIds)
  const by = administrator.get('5011')!
  const wardIds = new Map<string, string>()
  for (const ward of wards) wardIds.set(ward.code, (await createWard(tx, clock, by, { ...ward, calendarId: null })).id)
  for (const { code, name, ward, countEveryDays, countDays = '', mode } of rooms) {
    const room = { code, name, wardId: wardIds.get(ward)!, countEveryDays, countDays, mode }
    roomIds.set(code, (await createRoom(tx, clock, by, room)).id)
  }
  const staff = await createPeople(load, (p) => p.role !== 'administrator', roomIds)
  const supplierIds = new Map<string, string>()
  for (const supplier of suppliers)
    supplierIds.set(supplier.code, (await createSupplier(tx, clock, by, { ...supplier, calendarId: null })).id)
  const itemIds = await createItems(load, by, supplierIds)
  say(`Demo hospital: ${items.length} items, ${suppliers.length} suppliers, ${people.length} people.`)
  const binIds = await createBins(load, by, roomIds, itemIds)
  await setAims(load, binIds, staff)
}

/** From the first year of the history to the one after its last. */
async function createHolidays({ tx, clock, to }: Load): Promise<string> {
  const { id } = await createCalendar(tx, clock, null, { name: calendarName })
  const yearOf = (at: Date): number => DateTime.fromJSDate(at, { zone: hospital.timeZone }).year
  await updateCalendar(tx, clock, null, Number(id), { days: holidaysBetween(yearOf(clock.now()), yearOf(to) + 1) })
  return id
}

async function createPeople(
  { tx, clock, passwords }: Load,
  which: (person: (typeof people)[number]) => boolean,
  roomIds: ReadonlyMap<string, string>,
): Promise<Map<string, number>> {
  const ids = new Map<string, number>()
  for (const person of people.filter(which)) {
    const { rooms: codes, signIn: _, ...fields } = person
    const made = await createUser(tx, clock, null, {
      ...fields,
      roomIds: codes?.map((code) => roomIds.get(code)!) ?? null,
      password: passwords.get(person.staffCode) ?? randomBytes(18).toString('base64url'),
    })
    ids.set(person.staffCode, Number(made.id))
  }
  return ids
}

async function createItems(
  { tx, clock }: Load,
  by: number,
  supplierIds: ReadonlyMap<string, string>,
): Promise<Map<string, string>> {
  const ids = new Map<string, string>()
  for (const item of items) {
    const { uses: _, supplier, ...fields } = item
    const supplierId = supplierIds.get(supplier)!
    ids.set(item.code, (await createItem(tx, clock, by, { ...fields, supplierId, lookalikeIds: [] })).id)
  }
  const actor: Actor = { id: by, role: 'administrator', roomIds: null, authzVersion: 1 }
  for (const [one, other] of lookalikes)
    await updateItem(tx, clock, actor, Number(ids.get(one)), { lookalikeIds: [ids.get(other)!] })
  return ids
}

/** Like `createBin` for each, in a few statements: three hundred places one by one take most of the load's time. */
async function createBins(
  { tx, clock, say }: Load,
  by: number,
  roomIds: ReadonlyMap<string, string>,
  itemIds: ReadonlyMap<string, string>,
): Promise<Map<string, number>> {
  const plans = binPlans()
  const mains = plans.filter((plan) => plan.overflowOf === null)
  const now = clock.now()
  const rowOf = (plan: BinPlan, overflowOf: number | null) => ({
    bin: {
      code: plan.code,
      kind: 'counted' as const,
      overflowOf,
      roomId: Number(roomIds.get(plan.room.code)),
      bay: plan.bay,
      shelf: plan.shelf,
      walkOrder: plan.walkOrder,
      retiredAt: null,
    },
    assignment: {
      itemId: Number(itemIds.get(plan.item.code)),
      assignedFrom: now,
      assignedTo: null,
      enteredPar: overflowOf === null ? plan.parLevel : null,
      enteredReorderPoint: overflowOf === null ? plan.reorderPoint : null,
      capacity: plan.capacity,
    },
  })
  const rows = mains.map((plan) => rowOf(plan, null))
  const ids = await insertBins(tx, rows)
  const overflow = plans.flatMap((plan) => (plan.overflowOf === null ? [] : [rowOf(plan, ids.get(plan.overflowOf)!)]))
  for (const [code, id] of await insertBins(tx, overflow)) ids.set(code, id)
  const entry = { at: now, userId: by, action: 'bin-added', subject: 'bin' }
  const all = [...rows, ...overflow]
  await audit(
    tx,
    ...all.map(({ bin, assignment }) => ({
      ...entry,
      subjectId: ids.get(bin.code)!,
      after: { ...bin, ...assignment },
    })),
  )
  await touchBins(tx, now, [...ids.values()], null)
  say(`Demo hospital: ${ids.size} places stand.`)
  return ids
}

/** What a reviewer and a coordinator decided on the way: aims apart from the class, and a hard minimum. */
async function setAims(load: Load, binIds: ReadonlyMap<string, number>, staff: ReadonlyMap<string, number>) {
  const { tx, to } = load
  const binOf = (place: StoryPlace): number => binIds.get(storyPlan(binPlans(), place).code)!
  const ago = (days: number): Date => new Date(to.getTime() - days * 86_400_000)
  const ahead = (days: number): string =>
    DateTime.fromJSDate(to, { zone: hospital.timeZone }).plus({ days }).toISODate() ?? ''
  const reviewer = staff.get('4011')!
  const coordinator = staff.get('3011')!
  const set = { binId: binOf(story.reviewThisWeek), level: story.reviewThisWeek.level }
  const setReason = 'On two nights there were no 50 ml syringes left, and pumps could not be refilled in time.'
  await insertOverride(tx, {
    ...set,
    reason: setReason,
    policyReference: 'Supply policy 4.2',
    reviewBy: ahead(4),
    state: 'in-force',
    proposedBy: reviewer,
    proposedAt: ago(86),
    decidedBy: reviewer,
    decidedAt: ago(86),
  })
  const asked = { binId: binOf(story.proposed), level: story.proposed.level }
  const askedReason = 'Used up twice in a weekend; the next set is two wards away.'
  await insertOverride(tx, {
    ...asked,
    reason: askedReason,
    policyReference: 'Supply policy 4.2',
    reviewBy: ahead(180),
    state: 'proposed',
    proposedBy: coordinator,
    proposedAt: ago(1.2),
  })
  const floor = { binId: binOf(story.pinnedFloor), floor: story.pinnedFloor.floor }
  const floorReason = 'One for the trolley and one on the shelf, by the resuscitation group.'
  await insertFloor(tx, { ...floor, reason: floorReason, setBy: reviewer, setAt: ago(120) })
  const entry = { subject: 'bin', before: null }
  await audit(
    tx,
    {
      ...entry,
      at: ago(120),
      userId: reviewer,
      action: 'floor-set',
      subjectId: floor.binId,
      after: floor,
      reason: floorReason,
    },
    {
      ...entry,
      at: ago(86),
      userId: reviewer,
      action: 'service-level-set',
      subjectId: set.binId,
      after: set,
      reason: setReason,
    },
    {
      ...entry,
      at: ago(1.2),
      userId: coordinator,
      action: 'service-level-proposed',
      subjectId: asked.binId,
      after: asked,
      reason: askedReason,
    },
  )
}
