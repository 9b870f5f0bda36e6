import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { and, eq } from 'drizzle-orm'
import { auditLog } from '#server/audit/audit.tables.ts'
import { inTransaction } from '#server/db/transaction.ts'
import { jobHandlers } from '#server/jobs/handlers.ts'
import { enqueue, runOne, startWorker } from '#server/jobs/jobs.service.ts'
import { rebuildAll } from '#server/policy/rebuild.service.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room } from '#shared/contracts/catalogue.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, operation, sync } from '../support/factories.ts'

let app: TestApp
let nurse: Caller
let room: Room
let item: Item
let bin: Bin

const days = (n: number): void => app.clock.set(new Date(app.clock.now().getTime() + n * 86_400_000))
const enter = async (fields: Record<string, unknown>): Promise<void> => {
  const caller = await app.as('nurse')
  const reply = await sync(app, caller, [operation(app, fields)])
  expect(['accepted', 'accepted_with_conflict'], reply.text).toContain(reply.body.results[0].status)
}
const policyOf = async (id = bin.id): Promise<BinPolicy> =>
  (await (await app.as('nurse')).get(`/bins/${id}/policy`)).body as BinPolicy

/** Weekly counts and fillings: about two a day are used. */
async function history(place: Bin, uses: number[]): Promise<void> {
  let level = 40
  await enter({ type: 'count', binId: place.id, quantity: level })
  for (const use of uses) {
    days(3.5)
    await enter({ type: 'receipt', binId: place.id, quantity: 10 })
    days(3.5)
    level = level + 10 - use
    await enter({ type: 'count', binId: place.id, quantity: level })
  }
}

beforeAll(async () => {
  app = await startTestApp()
  nurse = await app.as('nurse')
  room = await makeRoom(app, { countEveryDays: 7 })
  item = await makeItem(app, { ved: 'V', unitsPerOrder: 10 })
  bin = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 400, enteredReorderPoint: 12, enteredPar: 30 })
})
afterAll(() => app.close())

describe('a bin’s policy', () => {
  it('is what was entered until there is something to learn from', async () => {
    await app.runJobs()
    expect(await policyOf()).toMatchObject({
      reorderPoint: 12,
      parLevel: 30,
      computed: { method: 'entered', demand: null, reorderPoint: null },
      serviceLevel: { target: 0.995, source: 'class' },
    })
  })

  it('learns from counts and deliveries within seconds, and can be computed again from its input', async () => {
    await history(bin, [13, 15, 12, 16, 14, 13, 15, 14, 12])
    expect(await app.runJobs()).toBeGreaterThan(0)
    const policy = await policyOf()
    expect(policy.intervals).toHaveLength(9)
    expect(policy.intervals.map((i) => i.quantity)).toEqual([13, 15, 12, 16, 14, 13, 15, 14, 12])
    expect(policy.computed).toMatchObject({ method: 'negative-binomial-mixture' })
    expect(policy.computed).toEqual(JSON.parse(JSON.stringify(reorderPoint(policy.input as PolicyInput))))
    expect(policy.reorderPoint).toBe(policy.computed!.reorderPoint)
    // Counted Monday 09:30; weekly counts, order slots on working days at 10:00, next day's delivery at 14:00.
    expect(policy.protection!.days).toBeCloseTo(8.1875, 6)
    nurse = await app.as('nurse')
    const { total } = (await nurse.get(`/bins?state=below&roomId=${room.id}`)).body
    expect(total).toBe((await nurse.get(`/bins/${bin.id}`)).body.position <= policy.reorderPoint! ? 1 : 0)
  })

  it('follows the reviewer at once, with reason and date, and writes it down', async () => {
    const before = await policyOf()
    const reviewer = await app.as('reviewer')
    const body = {
      level: 0.999,
      reason: 'Two nights without in spring',
      policyReference: 'Supply policy 4.2',
      reviewBy: '2027-06-30',
    }
    const coordinator = await app.as('coordinator')
    expect((await (await app.as('nurse')).post(`/bins/${bin.id}/service-level`, body)).status).toBe(403)
    const set = await reviewer.post(`/bins/${bin.id}/service-level`, body)
    expect(set.status, set.text).toBe(201)
    expect(set.body.serviceLevel).toMatchObject({ target: 0.999, source: 'bin-override', reviewBy: '2027-06-30' })
    expect(set.body.reorderPoint).toBeGreaterThan(before.reorderPoint!)
    expect(set.body.reorderPoint).toBe(
      reorderPoint({ ...(before.input as PolicyInput), ...(set.body.input as PolicyInput) }).reorderPoint,
    )
    const [row] = await app.database.db
      .select()
      .from(auditLog)
      .where(and(eq(auditLog.action, 'service-level-set'), eq(auditLog.subjectId, bin.id)))
    expect(row).toMatchObject({ userId: Number(reviewer.userId), reason: body.reason })
    const proposal = await coordinator.post(`/bins/${bin.id}/service-level`, { ...body, level: 0.99 })
    expect([proposal.status, proposal.body.serviceLevel.target, proposal.body.proposed.level]).toEqual([
      202, 0.999, 0.99,
    ])
    const decided = await reviewer.post(`/service-level-proposals/${proposal.body.proposed.id}/decision`, {
      decision: 'approve',
    })
    expect([decided.status, decided.body.serviceLevel.target]).toEqual([200, 0.99])
    const ended = await reviewer.delete(`/bins/${bin.id}/service-level`)
    expect(ended.body.serviceLevel).toMatchObject({ target: 0.995, source: 'class' })
  })

  it('refuses aims outside the hospital’s limits and dates that are no promise to look again', async () => {
    const reviewer = await app.as('reviewer')
    const good = { level: 0.99, reason: 'r', policyReference: 'p', reviewBy: '2027-03-01' }
    const pointer = async (body: object): Promise<string> =>
      (await reviewer.post(`/bins/${bin.id}/service-level`, body)).body.errors[0].pointer
    expect(await pointer({ ...good, level: 0.9995 })).toBe('/level')
    expect(await pointer({ ...good, level: 0.89 })).toBe('/level')
    expect(await pointer({ ...good, reviewBy: app.clock.now().toISOString().slice(0, 10) })).toBe('/reviewBy')
    expect(await pointer({ ...good, reviewBy: '2031-01-01' })).toBe('/reviewBy')
    expect(await pointer({ ...good, reason: ' ' })).toBe('/reason')
  })

  it('asks a second person where the hospital wants two, never the proposer', async () => {
    const admin = await app.as('administrator')
    expect((await admin.patch('/hospital', { twoPersons: true })).status).toBe(200)
    const reviewer = await app.as('reviewer')
    const body = { level: 0.998, reason: 'r', policyReference: 'p', reviewBy: '2027-03-01' }
    const proposed = await reviewer.post(`/bins/${bin.id}/service-level`, body)
    expect([proposed.status, proposed.body.serviceLevel.source]).toEqual([202, 'class'])
    const own = await reviewer.post(`/service-level-proposals/${proposed.body.proposed.id}/decision`, {
      decision: 'approve',
    })
    expect([own.status, own.body.code]).toEqual([409, 'own-proposal'])
    await admin.patch('/hospital', { twoPersons: false })
  })

  it('never goes below a pinned floor', async () => {
    const reviewer = await app.as('reviewer')
    const pinned = await reviewer.post(`/bins/${bin.id}/pinned-floor`, { floor: 90, reason: 'largest single use' })
    expect(pinned.body).toMatchObject({ reorderPoint: 90, computed: { warnings: expect.arrayContaining(['floor']) } })
    await reviewer.post(`/bins/${bin.id}/pinned-floor`, { floor: null, reason: 'over' })
  })

  it('keeps the entered levels where the room is kept as before, and shows the rest beside', async () => {
    const coordinator = await app.as('coordinator')
    await coordinator.patch(`/rooms/${room.id}`, { mode: 'beside' })
    await app.runJobs()
    const beside = await policyOf()
    expect(beside).toMatchObject({ mode: 'beside', reorderPoint: 12, pending: { waitsFor: 'a-person' } })
    expect(beside.computed!.reorderPoint).toBe(beside.pending!.reorderPoint)
    await coordinator.patch(`/rooms/${room.id}`, { mode: 'calculated' })
    await app.runJobs()
    expect((await policyOf()).reorderPoint).toBe(beside.computed!.reorderPoint)
  })

  it('is listed for the reviewer with what happened: delivery cycles, and those found empty', async () => {
    await enter({ type: 'count', binId: bin.id, quantity: 0 })
    const reviewer = await app.as('reviewer')
    const row = (await reviewer.get('/review?show=vital')).body.items.find((r: Bin) => r.id === bin.id)
    expect(row).toMatchObject({ target: 0.995, source: 'class', runOuts: { found: 1, cycles: 9 }, intervals: 9 })
  })

  it('tells the reviewer which points moved lately, and why', async () => {
    const reviewer = await app.as('reviewer')
    const { moved } = (await reviewer.get('/today')).body.reviewer
    expect(moved).toMatchObject([{ bin: { id: bin.id }, from: expect.any(Number), to: expect.any(Number) }])
    expect((await reviewer.get('/review?show=moved')).body.items.map((r: Bin) => r.id)).toEqual([bin.id])
  })

  it('reaches the coordinator within five seconds of a count, also while a run over every place is asked for', async () => {
    const { db } = app.database
    await inTransaction(db, (tx) => enqueue(tx, app.clock.now(), 'policy-all', { cause: 'calendar' }))
    const { 'policy-all': _run, ...short } = jobHandlers(db, app.clock)
    const worker = startWorker([() => runOne(db, app.clock, short, 'test')], 400, (error) => {
      throw error
    })
    const before = (await policyOf()).intervals.length
    days(7)
    const coordinator = await app.as('coordinator')
    await enter({ type: 'count', binId: bin.id, quantity: 25 })
    try {
      const seen = async (): Promise<number> =>
        ((await coordinator.get(`/bins/${bin.id}/policy`)).body as BinPolicy).intervals.length
      await expect.poll(seen, { timeout: 5_000, interval: 100 }).toBe(before + 1)
    } finally {
      await worker.stop()
      await app.runJobs()
    }
  })

  it('equals its projections after a rebuild', async () => {
    await app.runJobs()
    const said: string[] = []
    expect(await rebuildAll(app.database.db, app.clock, (line) => said.push(line)), said.join('\n')).toBe(0)
    expect(said.at(-1)).toContain('no difference')
  })
})

describe('POST /policy/preview', () => {
  it('works a textbook case out and stores nothing', async () => {
    const coordinator = await app.as('coordinator')
    // Stevenson, Operations Management 14e, ch. 12 example 8: N(50, 5), 97 % → 59.40, rounded up.
    const reply = await coordinator.post('/policy/preview', {
      demand: { meanPerDay: 50, variancePerDay: 25 },
      leadTime: { meanDays: 1 },
      serviceLevel: 0.97,
      method: 'normal',
      estimate: 'plug-in',
    })
    expect([reply.status, reply.body.reorderPoint]).toEqual([200, 60])
  })

  it('names the field it cannot use', async () => {
    const coordinator = await app.as('coordinator')
    const base = { demand: { meanPerDay: 5 }, leadTime: { meanDays: 2 }, serviceLevel: 0.98 }
    for (const [change, pointer] of [
      [{ serviceLevel: 1 }, '/serviceLevel'],
      [{ leadTime: { meanDays: -1 } }, '/leadTime/meanDays'],
      [{ extra: 1 }, '/extra'],
      [{ demand: undefined, intervals: [{ days: 3, quantity: 4 }], method: 'normal' }, '/intervals'],
    ] as const) {
      const reply = await coordinator.post('/policy/preview', { ...base, ...change })
      expect([reply.status, reply.body.errors[0].pointer]).toEqual([422, pointer])
    }
    expect((await (await app.as('nurse')).post('/policy/preview', base)).status).toBe(403)
  })
})
