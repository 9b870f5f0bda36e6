import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { policies, policyRuns } from '#server/policy/policy.tables.ts'
import { startPolicyWorkers } from '#server/policy/policy-workers.ts'
import { rebuildAll } from '#server/policy/rebuild.service.ts'
import { recomputeAll } from '#server/policy/runs.service.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room } from '#shared/contracts/catalogue.ts'
import type { PlannedChange } from '#shared/contracts/planned-changes.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { startTestApp, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, operation, sync } from '../support/factories.ts'

let app: TestApp
const dayMs = 86_400_000
const days = (n: number): void => app.clock.set(new Date(app.clock.now().getTime() + n * dayMs))
const dateIn = (n: number): string => new Date(app.clock.now().getTime() + n * dayMs).toISOString().slice(0, 10)

async function enter(...fields: Record<string, unknown>[]): Promise<void> {
  const reply = await sync(
    app,
    await app.as('nurse'),
    fields.map((f) => operation(app, f)),
  )
  for (const result of reply.body.results)
    expect(['accepted', 'accepted_with_conflict'], reply.text).toContain(result.status)
}

/** Weekly rounds over several places at once: each is filled by 20 and then counted; `uses` per place and week. */
async function rounds(places: { bin: Bin; uses: number[] }[], start = 60): Promise<void> {
  const level = new Map(places.map((p) => [p.bin.id, start]))
  await enter(...places.map((p) => ({ type: 'count', binId: p.bin.id, quantity: start })))
  for (let week = 0; week < places[0]!.uses.length; week += 1) {
    days(3.5)
    await enter(...places.map((p) => ({ type: 'receipt', binId: p.bin.id, quantity: 20 })))
    days(3.5)
    for (const p of places) level.set(p.bin.id, level.get(p.bin.id)! + 20 - p.uses[week]!)
    await enter(...places.map((p) => ({ type: 'count', binId: p.bin.id, quantity: level.get(p.bin.id) })))
  }
}

const policyOf = async (bin: Bin): Promise<BinPolicy> =>
  (await (await app.as('reviewer')).get(`/bins/${bin.id}/policy`)).body as BinPolicy

const isItself = (policy: BinPolicy): void =>
  expect(policy.computed).toEqual(JSON.parse(JSON.stringify(reorderPoint(policy.input as PolicyInput))))

let room: Room
let item: Item
let bin: Bin

beforeAll(async () => {
  app = await startTestApp()
  room = await makeRoom(app, { countEveryDays: 7 })
  item = await makeItem(app, { ved: 'E', unitsPerOrder: 10 })
  bin = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 400 })
  await rounds([{ bin, uses: [20, 22, 19, 21, 20, 62, 18, 21, 20, 19] }])
  await app.runJobs()
})
afterAll(() => app.close())

describe('a stretch unlike the rest', () => {
  it('is asked about and never dropped by itself', async () => {
    const policy = await policyOf(bin)
    expect(policy.questions).toMatchObject([{ quantity: 62 }])
    expect(policy.questions[0]!.expected).toBeCloseTo(20, 0)
    expect(policy.intervals.every((i) => i.used)).toBe(true)
    const asked = (await (await app.as('reviewer')).get('/review?show=asked')).body.items
    expect(asked).toMatchObject([{ id: bin.id, questions: 1 }])
  })

  it('is left out by a person, with a reason, and counts again when that is ended', async () => {
    const before = await policyOf(bin)
    const [question] = before.questions
    const span = { from: question!.from, to: question!.to }
    const coordinator = await app.as('coordinator')
    const path = `/bins/${bin.id}/exclusions`
    const good = { kind: 'excluded', ...span, reason: 'A neighbouring ward was evacuated here' }
    expect((await coordinator.post('/bins/999999/exclusions', good)).status).toBe(404)
    expect((await (await app.as('nurse')).post(path, good)).status).toBe(403)
    for (const [change, pointer] of [
      [{ to: null }, '/to'],
      [{ to: span.from }, '/to'],
      [{ from: new Date(app.clock.now().getTime() + dayMs).toISOString() }, '/from'],
      [{ kind: 'history-start' }, '/to'],
      [{ reason: ' ' }, '/reason'],
    ] as const) {
      const refused = await coordinator.post(path, { ...good, ...change })
      expect([refused.status, refused.body.errors[0].pointer]).toEqual([422, pointer])
    }
    const made = await coordinator.post(path, good)
    expect(made.status, made.text).toBe(201)
    const again = await coordinator.post(path, good)
    expect([again.status, again.body.code]).toEqual([409, 'already-decided'])
    const after = made.body as BinPolicy
    expect(after.questions).toEqual([])
    expect(after.intervals.find((i) => i.quantity === 62)).toMatchObject({ used: false, why: 'excluded' })
    expect(after.reorderPoint).toBeLessThan(before.reorderPoint!)
    expect(after.history[0]).toMatchObject({ cause: 'exclusion', causes: [{ what: 'use' }] })
    isItself(after)

    const [standing] = after.exclusions
    expect(standing).toMatchObject({ kind: 'excluded', reason: good.reason, byName: 'Test coordinator' })
    const ended = await coordinator.post(`/exclusions/${standing!.id}/end`, { reason: 'It may come again' })
    expect([ended.status, ended.body.reorderPoint, ended.body.exclusions]).toEqual([200, before.reorderPoint, []])
    const twice = await coordinator.post(`/exclusions/${standing!.id}/end`, { reason: 'r' })
    expect([twice.status, twice.body.code]).toEqual([409, 'already-decided'])
  })

  it('is not asked about again once a person says it was real', async () => {
    const before = await policyOf(bin)
    const { from, to } = before.questions[0]!
    const real = await (
      await app.as('reviewer')
    ).post(`/bins/${bin.id}/exclusions`, {
      kind: 'real',
      from,
      to,
      reason: 'Winter ward, it happens',
    })
    expect(real.body).toMatchObject({ questions: [], reorderPoint: before.reorderPoint })
    expect(real.body.exclusions).toMatchObject([{ kind: 'real' }])
  })

  it('belongs to another time after a start of the history', async () => {
    const policy = await policyOf(bin)
    const [, , , , , , seventh] = policy.intervals
    const started = await (
      await app.as('coordinator')
    ).post(`/bins/${bin.id}/exclusions`, {
      kind: 'history-start',
      from: new Date(Date.parse(seventh!.openedAt) + dayMs).toISOString(),
      reason: 'The ward moved',
    })
    expect(started.body.intervals.map((i: { why: string | null }) => i.why)).toEqual([
      ...Array.from({ length: 7 }, () => 'before-start'),
      null,
      null,
      null,
    ])
    expect(started.body.computed.demand.intervals).toBe(3)
    const [, start] = started.body.exclusions as BinPolicy['exclusions']
    await (await app.as('coordinator')).post(`/exclusions/${start!.id}/end`, { reason: 'mistaken' })
  })
})

describe('a planned change', () => {
  const change = (more: object): object => ({
    name: 'Four more beds',
    roomId: room.id,
    kind: 'factor',
    factor: 2,
    startsOn: dateIn(3),
    reason: 'The ward takes patients of another',
    ...more,
  })

  it('is refused where it cannot be used, naming the field', async () => {
    const coordinator = await app.as('coordinator')
    expect((await (await app.as('nurse')).post('/planned-changes', change({}))).status).toBe(403)
    for (const [more, pointer] of [
      [{ factor: null }, '/factor'],
      [{ factor: 1 }, '/factor'],
      [{ factor: 0 }, '/factor'],
      [{ roomId: '999999' }, '/roomId'],
      [{ itemIds: ['999999'] }, '/itemIds'],
      [{ endsOn: dateIn(1) }, '/endsOn'],
      [{ startsOn: '2031-01-01' }, '/startsOn'],
      [{ kind: 'cases', factor: null }, '/unitsPerCase'],
      [{ kind: 'cases', factor: null, unitsPerCase: 2, casesPerDay: 3 }, '/itemIds'],
      [{ kind: 'closed', factor: null, itemIds: [item.id] }, '/itemIds'],
      [{ kind: 'closed', factor: null, roomId: null }, '/wardId'],
      [{ weekdays: '88' }, '/weekdays'],
    ] as const) {
      const refused = await coordinator.post('/planned-changes', change(more))
      expect([refused.status, refused.body.errors?.[0].pointer], JSON.stringify(more)).toEqual([422, pointer])
    }
  })

  it('moves the reorder point one protection time ahead, and back when it is taken back', async () => {
    const before = await policyOf(bin)
    const coordinator = await app.as('coordinator')
    const far = await coordinator.post('/planned-changes', change({ startsOn: dateIn(40) }))
    expect(far.body).toMatchObject({ state: 'ahead', bins: 1, placeName: room.name, seen: null })
    const twice = await Promise.all(
      [1, 2].map(() => coordinator.post('/planned-changes', change({ startsOn: dateIn(40) }))),
    )
    expect(twice.map((r) => [r.status, r.body.code])).toEqual([
      [409, 'already-exists'],
      [409, 'already-exists'],
    ])
    await app.runJobs()
    expect((await policyOf(bin)).reorderPoint).toBe(before.reorderPoint)
    const near = await coordinator.patch(`/planned-changes/${far.body.id}`, { startsOn: dateIn(2) })
    expect(near.status, near.text).toBe(200)
    await app.runJobs()
    const raised = await policyOf(bin)
    expect(raised.reorderPoint).toBeGreaterThan(before.reorderPoint!)
    expect(raised.changes).toMatchObject([{ name: 'Four more beds', kind: 'factor', entered: 2, seen: null }])
    expect(raised.computed!.warnings).toContain('planned-change')
    expect(raised.history[0]).toMatchObject({ cause: 'planned-change', causes: [{ what: 'planned-change' }] })
    isItself(raised)
    const undone = await coordinator.post(`/planned-changes/${far.body.id}/take-back`, { reason: 'Not this year' })
    expect(undone.body.state).toBe('taken-back')
    expect((await coordinator.post(`/planned-changes/${far.body.id}/take-back`, { reason: 'r' })).status).toBe(409)
    await app.runJobs()
    expect((await policyOf(bin)).reorderPoint).toBe(before.reorderPoint)
  })

  it('adds units for cases on their days, shared by the places that hold the item', async () => {
    const before = await policyOf(bin)
    const coordinator = await app.as('coordinator')
    const cases = change({
      kind: 'cases',
      factor: null,
      itemIds: [item.id],
      unitsPerCase: 4,
      casesPerDay: 3,
      weekdays: '12345',
      startsOn: dateIn(0),
    })
    const made = await coordinator.post('/planned-changes', cases)
    await app.runJobs()
    const after = await policyOf(bin)
    const mean = (p: BinPolicy): number =>
      (p.computed as unknown as { protectionDemand: { mean: number } }).protectionDemand.mean
    // Eight days from the count to the next arrival but one, six of them working days, 12 units on each.
    expect(mean(after) - mean(before)).toBeGreaterThan(55)
    expect(mean(after) - mean(before)).toBeLessThan(85)
    await coordinator.post(`/planned-changes/${made.body.id}/take-back`, { reason: 'test over' })
    await app.runJobs()
  })

  it('closes a room: nothing is due or flagged, until the order for the reopening has to go', async () => {
    const coordinator = await app.as('coordinator')
    await enter({ type: 'count', binId: bin.id, quantity: 1 })
    await app.runJobs()
    const statesOf = async (): Promise<Bin> => (await (await app.as('coordinator')).get(`/bins/${bin.id}`)).body as Bin
    expect((await statesOf()).states).toContain('below')
    const closed = (
      await coordinator.post(
        '/planned-changes',
        change({ kind: 'closed', factor: null, startsOn: dateIn(0), endsOn: dateIn(20), name: 'New floor' }),
      )
    ).body as PlannedChange
    await app.runJobs()
    const shut = await statesOf()
    expect(shut.states).toEqual(['ok'])
    expect(shut.closed).toMatchObject({ until: expect.stringMatching(/^20/) })
    days(10)
    expect((await statesOf()).states).toEqual(['ok'])
    const worklist = async (): Promise<string[]> =>
      (await (await app.as('coordinator')).get('/worklist')).body.items.map((row: Bin) => row.id)
    expect(await worklist()).not.toContain(bin.id)
    // Opens again on a Monday, 1 February: Thursday's order at 10:00 is the last that is there before.
    days(7)
    await recomputeAll(app.database.db, app.clock, 'nightly')
    expect(app.clock.now().toISOString()).toBe('2027-01-28T09:30:00.000Z')
    expect(await worklist()).toContain(bin.id)
    await (await app.as('coordinator')).post(`/planned-changes/${closed.id}/take-back`, { reason: 'test over' })
    await app.runJobs()
  })
})

describe('like wards', () => {
  let shared: Item
  const places: Bin[] = []
  let newcomer: Bin

  beforeAll(async () => {
    shared = await makeItem(app, { ved: 'E', unitsPerOrder: 10 })
    for (let n = 0; n < 6; n += 1) {
      const ward = await makeRoom(app, { countEveryDays: 7 })
      places.push(await makeBin(app, { roomId: ward.id, itemId: shared.id, capacity: 400 }))
    }
    await rounds(places.map((place, n) => ({ bin: place, uses: [18 + n, 20 - n, 19 + n, 21, 20 + n, 22] })))
    const ward = await makeRoom(app, { countEveryDays: 7 })
    newcomer = await makeBin(app, { roomId: ward.id, itemId: shared.id, capacity: 400 })
    await enter({ type: 'count', binId: newcomer.id, quantity: 30 })
    await app.runJobs()
    await recomputeAll(app.database.db, app.clock, 'nightly')
  })

  it('give a place with a single count a start, and say so', async () => {
    const policy = await policyOf(newcomer)
    expect(policy.computed).toMatchObject({ method: 'negative-binomial-mixture' })
    expect(policy.computed!.warnings).toEqual(expect.arrayContaining(['pooled', 'few-intervals']))
    expect(policy.reorderPoint).toBeGreaterThan(15)
    expect(policy.pool).toMatchObject({ basis: 'item', ownShare: 0 })
    expect(policy.pool!.wards).toHaveLength(6)
    expect(policy.pool!.wards[0]!.meanPerDay).toBeCloseTo(20 / 7, 0)
    isItself(policy)
    const old = await policyOf(places[0]!)
    expect(old.pool!.ownShare).toBeGreaterThan(0)
    expect(old.pool!.ownShare).toBeLessThan(1)
    expect(old.pool!.wards.filter((w) => w.own)).toHaveLength(1)
  })

  it('may be left out one by one, by a person with a reason', async () => {
    const before = await policyOf(newcomer)
    const coordinator = await app.as('coordinator')
    const path = `/bins/${newcomer.id}/like-wards`
    const ward = before.pool!.wards.at(-1)!
    const body = { wardId: ward.wardId, leftOut: true, reason: 'Another kind of patient' }
    expect((await (await app.as('nurse')).post(path, body)).status).toBe(403)
    expect((await coordinator.post(path, { ...body, wardId: '999999' })).status).toBe(404)
    const left = await coordinator.post(path, body)
    expect(left.status, left.text).toBe(200)
    const wards = (left.body as BinPolicy).pool!.wards
    expect(wards.filter((w) => w.leftOut).map((w) => w.wardId)).toEqual([ward.wardId])
    const prior = (p: BinPolicy) => (p.input as PolicyInput).prior!.rate
    expect(prior(left.body as BinPolicy)).not.toEqual(prior(before))
    const back = await coordinator.post(path, { ...body, leftOut: false })
    expect(prior(back.body as BinPolicy)).toEqual(prior(before))
  })

  it('do not help where the hospital switched it off', async () => {
    const admin = await app.as('administrator')
    await admin.patch('/hospital', { pooling: false })
    await app.runJobs()
    await recomputeAll(app.database.db, app.clock, 'nightly')
    expect(await policyOf(newcomer)).toMatchObject({ pool: null, computed: { method: 'entered' } })
    await admin.patch('/hospital', { pooling: true })
    await app.runJobs()
  })
})

describe('how a room is kept', () => {
  it('leaves vital places with what was entered until the reviewer agrees', async () => {
    const kept = await makeRoom(app, { countEveryDays: 7, mode: 'as-before' })
    const vital = await makeItem(app, { ved: 'V', unitsPerOrder: 10 })
    const essential = await makeItem(app, { ved: 'E', unitsPerOrder: 10 })
    const of = (itemId: string) =>
      makeBin(app, { roomId: kept.id, itemId, capacity: 400, enteredReorderPoint: 150, enteredPar: 200 })
    const pair = [await of(vital.id), await of(essential.id)] as const
    await rounds(pair.map((place) => ({ bin: place, uses: [20, 21, 19, 20, 22, 18, 20, 21, 20] })))
    await app.runJobs()
    const coordinator = await app.as('coordinator')
    const sheet = (await coordinator.get(`/rooms/${kept.id}/levels`)).body
    expect(sheet).toMatchObject({ places: 2, fall: 2, rise: 0, vital: 1 })
    expect(sheet.rows[0]).toMatchObject({ entered: 150, calculated: expect.any(Number) })
    expect((await (await app.as('nurse')).post(`/rooms/${kept.id}/mode`, { mode: 'calculated' })).status).toBe(403)
    expect((await coordinator.post(`/rooms/${kept.id}/mode`, { mode: 'calculated' })).status).toBe(200)
    await app.runJobs()
    expect((await policyOf(pair[1])).reorderPoint).toBeLessThan(150)
    expect(await policyOf(pair[0])).toMatchObject({
      reorderPoint: 150,
      pending: { waitsFor: 'a-person', causes: [{ what: 'entered' }] },
    })
    const agreed = await (await app.as('reviewer')).post(`/bins/${pair[0].id}/accept-calculated`)
    expect(agreed.body).toMatchObject({ pending: null, reorderPoint: agreed.body.computed.reorderPoint })
  })
})

describe('a run over every place', () => {
  it('goes on where it was cut short, and is whole', async () => {
    const { db } = app.database
    const all = await db.select({ binId: policies.binId }).from(policies).where(eq(policies.isCurrent, true))
    const ids = all.map((r) => r.binId).sort((a, b) => a - b)
    const middle = ids[Math.floor(ids.length / 2)]!
    days(1)
    const [run] = await db
      .insert(policyRuns)
      .values({
        startedAt: app.clock.now(),
        cause: 'nightly',
        bins: ids.length,
        done: 3,
        changed: 0,
        lastBinId: middle,
      })
      .$returningId()
    const asked = app.clock.now()
    days(0.01)
    const progress: number[] = []
    await recomputeAll(db, app.clock, 'nightly', {
      resumeSince: new Date(asked.getTime() - dayMs),
      onProgress: (done) => progress.push(done),
    })
    const confirmed = await db
      .select({ binId: policies.binId, at: policies.confirmedAt })
      .from(policies)
      .where(eq(policies.isCurrent, true))
    const touched = confirmed.filter((r) => r.at >= asked).map((r) => r.binId)
    expect(touched.sort((a, b) => a - b)).toEqual(ids.filter((id) => id > middle))
    const reply = (await (await app.as('reviewer')).get('/policy/run')).body
    expect(reply.run).toMatchObject({ bins: progress.at(-1), done: progress.at(-1), finishedAt: expect.any(String) })
    expect((await db.select().from(policyRuns).where(eq(policyRuns.id, run!.id)))[0]!.finishedAt).not.toBeNull()
  })

  it('has threads that answer in order, as one would alone', async () => {
    const inputs: PolicyInput[] = [2, 9, 4, 30, 1].map((perDay) => ({
      intervals: [3, 4, 7].map((n) => ({ days: n, quantity: perDay * n + (n % 2) })),
      leadTime: { meanDays: 2 },
      reviewPeriodDays: 1,
      serviceLevel: 0.98,
    }))
    const workers = startPolicyWorkers(2)
    try {
      expect(await workers.compute(inputs)).toEqual(inputs.map((input) => reorderPoint(input)))
      const seen = { ...inputs[0]!, leadTime: { meanDays: 2, observedDays: [1, 2, 5] } }
      const more = [...inputs, seen, { ...inputs[1]!, intervals: [] }]
      expect(await workers.points(more)).toEqual(more.map((input) => reorderPoint(input).computedReorderPoint))
    } finally {
      await workers.stop()
    }
  })

  it('gives what a look at each place gives, and equals the ledger', async () => {
    const { db } = app.database
    await recomputeAll(db, app.clock, 'nightly')
    for (const row of await db.select().from(policies).where(eq(policies.isCurrent, true)))
      expect(row.result).toEqual(JSON.parse(JSON.stringify(reorderPoint(row.input as PolicyInput))))
    const said: string[] = []
    expect(await rebuildAll(db, app.clock, (line) => said.push(line)), said.join('\n')).toBe(0)
  })
})
