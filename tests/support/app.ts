import type { Express } from 'express'
import supertest from 'supertest'
import { createApp } from '#server/app.ts'
import { createHospital } from '#server/catalogue/hospital.service.ts'
import { movableClock } from '#server/clock.ts'
import { inTransaction } from '#server/db/transaction.ts'
import type { RegisteredRoute } from '#server/http/endpoint.ts'
import { jobHandlers } from '#server/jobs/handlers.ts'
import { drainJobs } from '#server/jobs/jobs.service.ts'
import { createUser } from '#server/people/people.service.ts'
import type { Hospital } from '#shared/contracts/hospital.ts'
import type { Role } from '#shared/contracts/contract.ts'
import { createTestDatabase, type TestDatabase } from './database.ts'

export const password = 'a long enough one'

/** Monday, mid-morning, in the hospital's winter time. */
export const startMoment = new Date('2026-11-02T09:30:00.000Z')

export const testHospital: Hospital = {
  name: 'Tallowmere General',
  timeZone: 'Europe/London',
  binWord: 'bin',
  currency: 'GBP',
  levels: { V: 0.995, E: 0.98, D: 0.95 },
  floor: 0.9,
  ceiling: 0.999,
  twoPersons: false,
  vitalPolicyText: 'Follow the supply policy of Tallowmere General.',
  vitalPolicyLink: 'https://intranet.tallowmere.example/supply-policy',
  resupplyPhone: '2210',
  orderingCost: 0,
  holdingRatePerYear: 0.2,
  calendarId: null,
  pooling: true,
  demo: false,
}

export type Agent = ReturnType<typeof supertest.agent>

/** The calls every test makes: marker header on writes, cookies kept. */
export interface Caller {
  get(path: string): supertest.Test
  post(path: string, body?: unknown): supertest.Test
  patch(path: string, body: unknown): supertest.Test
  delete(path: string): supertest.Test
  userId: string
}

export interface TestApp {
  database: TestDatabase
  clock: ReturnType<typeof movableClock>
  app: Express
  routes: RegisteredRoute[]
  people: Record<Role, string>
  anyone: Caller
  as(role: Role): Promise<Caller>
  signedIn(account: string, password?: string): Promise<Caller>
  runJobs(): Promise<number>
  close(): Promise<void>
}

function callerOf(agent: Agent, userId: string): Caller {
  const at = (path: string): string =>
    path.startsWith('/healthz') || path.startsWith('/readyz') ? path : `/api/v1${path}`
  return {
    userId,
    get: (path) => agent.get(at(path)),
    post: (path, body) => {
      const call = agent.post(at(path)).set('X-Brimline', '1')
      return body === undefined ? call : call.send(body as object)
    },
    patch: (path, body) =>
      agent
        .patch(at(path))
        .set('X-Brimline', '1')
        .send(body as object),
    delete: (path) => agent.delete(at(path)).set('X-Brimline', '1'),
  }
}

/** The real app on a database of its own, with one person per role who may enter every room. */
export async function startTestApp(): Promise<TestApp> {
  const database = await createTestDatabase()
  const clock = movableClock(startMoment)
  const { app, routes } = createApp({
    db: database.db,
    clock,
    dataDir: '.tmp',
    clientDir: null,
    sessionSecrets: ['a secret for tests'],
    publicUrl: null,
    trustProxy: null,
    logLevel: 'silent',
  })
  const people = await inTransaction(database.db, async (tx) => {
    await createHospital(tx, clock, testHospital)
    const ids = {} as Record<Role, string>
    for (const role of ['nurse', 'coordinator', 'reviewer', 'administrator'] as const) {
      const fields = {
        name: `Test ${role}`,
        email: `${role}@tallowmere.example`,
        staffCode: `T-${role}`,
        role,
        roomIds: null,
        password,
      }
      ids[role] = (await createUser(tx, clock, null, fields)).id
    }
    return ids
  })
  const signedIn = async (account: string, secret = password): Promise<Caller> => {
    const agent = supertest.agent(app)
    const by = account.includes('@') ? { email: account } : { staffCode: account }
    const reply = await agent
      .post('/api/v1/session')
      .set('X-Brimline', '1')
      .send({ ...by, password: secret })
    if (reply.status !== 201) throw new Error(`sign-in failed: ${reply.status} ${reply.text}`)
    return callerOf(agent, (reply.body as { user: { id: string } }).user.id)
  }
  const callers = new Map<Role, Caller>()
  return {
    database,
    clock,
    app,
    routes,
    people,
    anyone: callerOf(supertest.agent(app), ''),
    async as(role) {
      const known = callers.get(role)
      // The clock of a test may have run past the session.
      if (known && ((await known.get('/session')).body as { user: unknown }).user) return known
      const caller = await signedIn(`${role}@tallowmere.example`)
      callers.set(role, caller)
      return caller
    },
    signedIn,
    runJobs: () => drainJobs(database.db, clock, jobHandlers(database.db, clock)),
    close: () => database.drop(),
  }
}
