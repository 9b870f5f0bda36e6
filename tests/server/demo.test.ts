import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { uuidv7 } from 'uuidv7'
import { readCalendar } from '#server/catalogue/calendars.service.ts'
import { readHospital } from '#server/catalogue/hospital.service.ts'
import { listItems } from '#server/catalogue/items.service.ts'
import { listRooms, listSuppliers, listWards } from '#server/catalogue/places.service.ts'
import { movableClock } from '#server/clock.ts'
import { momentOf, viewBins, type BinView } from '#server/counts/bin-view.service.ts'
import { syncOperations } from '#server/counts/counts.service.ts'
import { foldedLedger, levelDifference, toLedgerRow } from '#server/counts/levels.service.ts'
import { movements, operations } from '#server/counts/counts.tables.ts'
import { auditLog } from '#server/audit/audit.tables.ts'
import { jobs } from '#server/jobs/jobs.tables.ts'
import { rebuildAll } from '#server/policy/rebuild.service.ts'
import { policies } from '#server/policy/policy.tables.ts'
import { ensureFirstData } from '#server/demo/first-data.ts'
import { liveOn } from '#server/demo/live-on.ts'
import { story, type StoryPlace } from '#server/demo/story.ts'
import { readEnv, type ServerEnv } from '#server/env.ts'
import type { Actor } from '#server/http/context.ts'
import { checkSignIn, findActor } from '#server/people/people.service.ts'
import { listOrders } from '#server/replenishment/orders.service.ts'
import { orders } from '#server/replenishment/replenishment.tables.ts'
import { listReview } from '#server/review/review.service.ts'
import { Operation } from '#shared/contracts/counts.ts'
import { orderStates } from '#shared/contracts/replenishment.ts'
import { operationFlags } from '#shared/ledger/flags.ts'
import { fold } from '#shared/ledger/fold.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { createTestDatabase, type TestDatabase } from '#tests/support/database.ts'

const now = new Date('2026-11-05T14:20:00.000Z')
const dayMs = 86_400_000
const clock = movableClock(now)
const env = (more: Record<string, string> = {}): ServerEnv => readEnv({ DATABASE_URL: 'mysql://unused', ...more })

let database: TestDatabase
let views: BinView[]
let signIns: string[]
const said: string[] = []

class Cut extends Error {}

/** Stops the load where a power cut might: between two of its transactions. */
const cutAt =
  (words: string) =>
  (line: string): void => {
    if (line.includes(words)) throw new Cut(line)
  }

beforeAll(async () => {
  database = await createTestDatabase()
  const load = (say: (line: string) => void): Promise<string[]> => ensureFirstData(database.db, clock, env(), true, say)
  await expect(load(cutAt('places have their history'))).rejects.toThrow(Cut)
  signIns = await load((line) => said.push(line))
  views = await allViews()
}, 150_000)
afterAll(() => database.drop())

const allViews = (): Promise<BinView[]> =>
  viewBins(database.db, momentOf(clock, 'Europe/London'), { roomIds: null, retired: false })

async function roomCodes(): Promise<Map<string, string>> {
  const { items } = await listRooms(database.db, clock, everybody, { page: 1, pageSize: 100, retired: 'no' })
  return new Map(items.map((room) => [room.id, room.code]))
}

async function at(place: StoryPlace): Promise<BinView> {
  const codes = await roomCodes()
  const found = views.find(
    (v) => v.bin.overflowOf === null && codes.get(v.bin.roomId) === place.room && v.bin.item?.code === place.item,
  )
  if (!found) throw new Error(`no place holds ${place.item} in ${place.room}`)
  return found
}

const everybody: Actor = { id: 1, role: 'coordinator', roomIds: null, authzVersion: 1 }
const list = { page: 1, pageSize: 500, retired: 'no' as const }

async function resultOf(binId: number): Promise<PolicyResult> {
  const rows = await database.db.select().from(policies)
  return rows.find((row) => row.binId === binId && row.isCurrent)?.result as PolicyResult
}

describe('the demo hospital', () => {
  it('stands with its wards, rooms, items and places', async () => {
    expect((await listWards(database.db, list)).total).toBeGreaterThanOrEqual(5)
    expect((await listRooms(database.db, clock, everybody, list)).total).toBe(12)
    expect((await listItems(database.db, list)).total).toBeGreaterThanOrEqual(180)
    expect((await listSuppliers(database.db, list)).total).toBe(4)
    expect(views.length).toBeGreaterThanOrEqual(300)
  })

  it('goes by a calendar of holidays, and has seen how long deliveries take', async () => {
    const { calendarId } = await readHospital(database.db)
    const calendar = await readCalendar(database.db, clock, Number(calendarId))
    expect(calendar).toMatchObject({ isHospital: true, emptyYear: null })
    expect(calendar.days.map((d) => d.date)).toContain('2026-12-25')
    for (const { name, seen } of (await listSuppliers(database.db, list)).items) {
      expect(seen.deliveries, name).toBeGreaterThan(20)
      expect(Math.abs(seen.delayDays ?? 99), name).toBeLessThan(3)
    }
  })

  it('says the sign-ins, and they work', async () => {
    expect(signIns.join('\n')).toContain('brimline-demo')
    for (const name of ['nurse', 'coordinator', 'reviewer', 'second.reviewer', 'admin']) {
      const email = `${name}@tallowmere.example`
      expect(signIns.join('\n')).toContain(email)
      expect(await checkSignIn(database.db, clock, { email }, 'brimline-demo', '127.0.0.1')).not.toBeNull()
    }
  })

  it('dates nothing after now', async () => {
    const newest = (rows: (Date | null)[]): number => Math.max(...rows.map((at) => at?.getTime() ?? 0))
    const ledger = await database.db.select({ a: movements.recordedAt, b: movements.effectiveAt }).from(movements)
    expect(ledger.length).toBeGreaterThan(15_000)
    expect(newest(ledger.flatMap((r) => [r.a, r.b]))).toBeLessThanOrEqual(now.getTime())
    const sent = await database.db
      .select({ a: orders.createdAt, b: orders.sentAt, c: orders.acknowledgedAt, d: orders.cancelledAt })
      .from(orders)
    expect(newest(sent.flatMap((r) => [r.a, r.b, r.c, r.d]))).toBeLessThanOrEqual(now.getTime())
    expect(newest((await database.db.select({ at: auditLog.at }).from(auditLog)).map((r) => r.at))).toBeLessThanOrEqual(
      now.getTime(),
    )
  })

  it('equals its projections, and every policy its own input', async () => {
    const report: string[] = []
    expect(await rebuildAll(database.db, clock, (line) => report.push(line)), report.join('\n')).toBe(0)
  })

  it('has levels that equal a fresh fold of the ledger', async () => {
    for (const view of views) expect(await levelDifference(database.db, view.row.id), view.bin.code).toBeNull()
  })

  it('wrote entries that a phone could have sent, with one audit row each', async () => {
    const rows = await database.db.select().from(operations)
    for (const row of rows) {
      const read = Operation.safeParse(row.payload)
      if (!read.success) expect.fail(`${row.opId}: ${read.error.message}`)
    }
    const audited = await database.db.select({ after: auditLog.after, subject: auditLog.subject }).from(auditLog)
    const ids = audited.flatMap((r) => (r.subject === 'bin' && (r.after as { opId?: string } | null)?.opId) || [])
    expect(ids.length).toBe(rows.length)
    expect(new Set(ids).size).toBe(rows.length)
  })

  it('flagged entries as if each had come in on its own', async () => {
    let flagged = 0
    for (const view of views.filter((_, i) => i % 16 === 0)) {
      const { rows } = await foldedLedger(database.db, view.row.id, view.row.assignmentId)
      const before = (one: (typeof rows)[number], other: (typeof rows)[number]): boolean =>
        one.recordedAt < other.recordedAt ||
        (one.recordedAt.getTime() === other.recordedAt.getTime() && one.effectiveAt <= other.effectiveAt)
      for (const row of rows.filter((r) => r.part === 0)) {
        const then = fold(rows.filter((r) => before(r, row)).map(toLedgerRow))
        expect(row.flags, row.opId).toEqual(operationFlags(then, row.opId, view.bin.packSize))
        flagged += row.flags.length
      }
    }
    expect(flagged).toBeGreaterThan(0)
  })

  it('has orders in every state, two of them late', async () => {
    const { items } = await listOrders(database.db, { page: 1, pageSize: 5000 })
    for (const state of orderStates) expect(items.filter((o) => o.state === state).length, state).toBeGreaterThan(0)
    const open = new Set(['sent', 'acknowledged', 'part-received'])
    const late = items.filter((o) => open.has(o.state) && (o.expectedOn ?? '') < '2026-11-05')
    expect(late.map((o) => o.lines.map((l) => l.binId)).sort()).toEqual(
      [[(await at(story.emptyVital)).bin.id], [(await at(story.lateBelieved)).bin.id]].sort(),
    )
    const numbers = items.filter((o) => o.sentAt).map((o) => o.number)
    expect(new Set(numbers).size).toBe(numbers.length)
  })

  it('has a morning’s work on the list: about one counted place in ten', () => {
    const below = views.filter((v) => v.bin.states.includes('below')).length
    expect(below).toBeGreaterThanOrEqual(20)
    expect(below).toBeLessThanOrEqual(35)
    const share = below / views.filter((v) => v.bin.lastCount).length
    expect(share).toBeGreaterThan(0.06)
    expect(share).toBeLessThan(0.12)
  })

  it('has twelve places due in the room of the ward’s sign-in', async () => {
    const codes = await roomCodes()
    const due = views.filter((v) => v.bin.states.some((s) => s === 'count-overdue' || s === 'never-counted'))
    expect(due.filter((v) => codes.get(v.bin.roomId) === story.due.room).length).toBe(story.due.places)
    const never = views.filter((v) => v.bin.states.includes('never-counted')).map((v) => v.bin.item?.code)
    expect(never.sort()).toEqual(story.neverCounted.map((p) => p.item).sort())
    const nurse = await checkSignIn(database.db, clock, { staffCode: '2041' }, 'brimline-demo', '127.0.0.1')
    expect(nurse?.roomIds?.map((id) => codes.get(String(id)))).toContain(story.due.room)
    // Whatever else a phone calls due: nothing more in the ward.
    const first = views.filter((v) => v.bin.states.includes('count-first') && nurse?.roomIds?.includes(v.row.roomId))
    expect(first.every((v) => v.bin.states.includes('count-overdue'))).toBe(true)
  })

  it('keeps every policy as it was worked out, and leaves no work behind', async () => {
    const rows = await database.db.select().from(policies)
    expect(rows.filter((r) => r.isCurrent).length).toBe(views.filter((v) => v.bin.overflowOf === null).length)
    expect((await database.db.select().from(jobs)).length).toBe(0)
  })
})

describe('its stories', () => {
  it('a vital item is out, its order late beyond belief, while eighteen lie next door', async () => {
    const empty = (await at(story.emptyVital)).bin
    expect(empty).toMatchObject({ onHand: 0, onOrder: 0, item: { ved: 'V' } })
    expect(empty.states).toEqual(expect.arrayContaining(['empty', 'below', 'late-order']))
    const nextDoor = (await at(story.nextDoor)).bin
    expect(nextDoor).toMatchObject({ onHand: 18, itemId: empty.itemId })
    expect(nextDoor.roomId).not.toBe(empty.roomId)
  })

  it('a shelf is too small for its aim, an item is used twice a month, one comes in lumps', async () => {
    const small = await at(story.smallShelf)
    expect((await resultOf(small.row.id)).warnings).toContain('shelf-cannot-hold')
    const rare = (await resultOf((await at(story.twiceAMonth)).row.id)).demand!
    expect(rare.meanPerDay * 30).toBeLessThan(5)
    const lumpy = (await resultOf((await at(story.lumpy)).row.id)).demand!
    expect(lumpy.dispersion).toBeGreaterThan(3)
  })

  it('an aim is due for review this week, another waits for a second person', async () => {
    const reviewer: Actor = { id: 1, role: 'reviewer', roomIds: null, authzVersion: 1 }
    const rows = (await listReview(database.db, clock, reviewer, { show: 'all', page: 1, pageSize: 500 })).items
    const due = rows.filter((r) => r.review === 'this-week')
    expect(due.map((r) => r.id)).toEqual([(await at(story.reviewThisWeek)).bin.id])
    expect(due[0]).toMatchObject({ target: story.reviewThisWeek.level, source: 'bin-override' })
    const proposed = rows.filter((r) => r.proposal !== null)
    expect(proposed.map((r) => r.id)).toEqual([(await at(story.proposed)).bin.id])
    expect(proposed[0]?.proposal?.level).toBe(story.proposed.level)
  })

  it('some stock is held, some stands in an overflow place, and two bags look alike', async () => {
    expect((await at(story.held)).bin.held).toBe(story.held.units)
    const main = await at(story.overflow[0]!)
    const overflow = views.find((v) => v.bin.overflowOf === main.bin.id)
    expect(overflow?.bin.itemId).toBe(main.bin.itemId)
    expect(overflow?.row.onHand).toBeGreaterThan(0)
    const [one, other] = [await at(story.lookalikes[0]!), await at(story.lookalikes[1]!)]
    const { items } = await listItems(database.db, { ...list, q: one.bin.item!.code })
    expect(items[0]?.lookalikeIds).toEqual([other.bin.itemId])
    expect([one.bin.bay, one.bin.shelf]).toEqual([other.bin.bay, other.bin.shelf])
  })
})

describe('later starts', () => {
  it('write nothing twice', async () => {
    const before = await database.db.$count(auditLog)
    expect(await ensureFirstData(database.db, clock, env(), true, () => {})).toEqual(signIns)
    expect(await database.db.$count(auditLog)).toBe(before)
  })

  it('replace the known password where others can reach the server, and give it back on loopback', async () => {
    const heard: string[] = []
    const lines = await ensureFirstData(database.db, clock, env({ HOST: '0.0.0.0' }), true, (l) => heard.push(l))
    expect(lines.join('\n')).not.toContain('brimline-demo')
    const email = 'admin@tallowmere.example'
    const signIn = (password: string) => checkSignIn(database.db, clock, { email }, password, '127.0.0.1')
    expect(await signIn('brimline-demo')).toBeNull()
    const told = heard.find((line) => line.includes(email))!.split('password ')[1]!
    expect(await signIn(told)).not.toBeNull()
    const again: string[] = []
    await ensureFirstData(database.db, clock, env({ HOST: '0.0.0.0' }), true, (l) => again.push(l))
    expect(again).toEqual([])
    await ensureFirstData(database.db, clock, env(), true, () => {})
    expect(await signIn('brimline-demo')).not.toBeNull()
  })

  it('live on to the moment of the start and leave alone what people did', async () => {
    const nurse = await checkSignIn(database.db, clock, { staffCode: '2041' }, 'brimline-demo', '127.0.0.1')
    const actor = (await findActor(database.db, nurse!.id))!
    const place = await at(story.oldCounts[0]!)
    clock.set(new Date(now.getTime() + 20 * 60_000))
    const item = {
      opId: uuidv7(),
      v: 1,
      localSeq: 1,
      binId: place.bin.id,
      deviceTime: clock.now().toISOString(),
      type: 'count',
      quantity: 9,
    }
    const batch = { deviceId: 'somebody', userId: String(actor.id), appVersion: 'test', items: [item] }
    expect((await syncOperations(database.db, clock, actor, batch)).results[0]?.status).toMatch(/^accepted/)
    const later = new Date(now.getTime() + 1.8 * dayMs)
    clock.set(later)
    const began = new Date(now.getTime() - 200 * dayMs).getTime()
    expect(await liveOn(database.db, clock, { began, from: now.getTime() })).toBe(true)
    const fresh = (await database.db.select().from(movements)).filter((m) => m.recordedAt > now && m.opId !== item.opId)
    expect(fresh.length).toBeGreaterThan(100)
    expect(fresh.every((m) => m.recordedAt <= later && m.effectiveAt <= m.recordedAt)).toBe(true)
    expect(fresh.filter((m) => m.binId === place.row.id && m.type === 'count')).toEqual([])
    views = await allViews()
    for (const view of views) expect(await levelDifference(database.db, view.row.id), view.bin.code).toBeNull()
    expect((await at(story.emptyVital)).bin.states).toEqual(expect.arrayContaining(['empty', 'late-order']))
    const count = await database.db.$count(movements)
    expect(await liveOn(database.db, clock, { began, from: later.getTime() })).toBe(false)
    expect(await database.db.$count(movements)).toBe(count)
  })
})

describe('an empty hospital', () => {
  it('has one administrator whose sign-in is said once', async () => {
    const other = await createTestDatabase()
    try {
      const heard: string[] = []
      expect(await ensureFirstData(other.db, clock, env(), false, (line) => heard.push(line))).toEqual([])
      const password = heard.join('\n').match(/password (\S+)/)?.[1] ?? ''
      const person = await checkSignIn(other.db, clock, { staffCode: 'ADMIN-1' }, password, '127.0.0.1')
      expect(person?.role).toBe('administrator')
      expect(await viewBins(other.db, momentOf(clock, 'UTC'), { roomIds: null, retired: false })).toEqual([])
      const again: string[] = []
      await ensureFirstData(other.db, clock, env({ DEMO: 'no' }), false, (line) => again.push(line))
      expect(again).toEqual([])
      await ensureFirstData(other.db, clock, env({ DEMO: 'yes' }), false, (line) => again.push(line))
      expect(again.join()).toContain('hospital of its own')
    } finally {
      await other.drop()
    }
  })
})
