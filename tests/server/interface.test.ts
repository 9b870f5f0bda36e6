import { sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import supertest from 'supertest'
import { createApp } from '#server/app.ts'
import { grants } from '#server/db/grants.ts'
import type { Contract, Role } from '#shared/contracts/contract.ts'
import { problemTable } from '#shared/contracts/problems.ts'
import { startTestApp, type TestApp } from '../support/app.ts'

let app: TestApp
beforeAll(async () => {
  app = await startTestApp()
})
afterAll(() => app.close())

const roles: Role[] = ['nurse', 'coordinator', 'reviewer', 'administrator']
const pathOf = (contract: Contract): string =>
  contract.path.replace(':token', 'a'.repeat(24)).replace(/:[a-z]+/gi, '999999')
const isWrite = (contract: Contract): boolean => contract.method !== 'GET'

function call(contract: Contract, cookie?: string) {
  const method = contract.method.toLowerCase() as 'get' | 'post' | 'patch' | 'delete'
  const request = supertest(app.app)[method](`/api/v1${pathOf(contract)}`)
  if (cookie) request.set('Cookie', cookie)
  return request
}

async function cookieOf(role: Role): Promise<string> {
  const reply = await supertest(app.app)
    .post('/api/v1/session')
    .set('X-Brimline', '1')
    .send({ email: `${role}@tallowmere.example`, password: 'a long enough one' })
  return reply.get('Set-Cookie')![0]!.split(';')[0]!
}

describe('every route', () => {
  it('asks for a session and for the role its contract names, before it looks at the body', async () => {
    const cookies = new Map<Role, string>()
    for (const role of roles) cookies.set(role, await cookieOf(role))
    for (const { contract } of app.routes) {
      const where = `${contract.method} ${contract.path}`
      const sent = (cookie?: string) => {
        const request = call(contract, cookie)
        return isWrite(contract) ? request.set('X-Brimline', '1') : request
      }
      if (contract.allow === 'anyone') continue
      expect((await sent()).status, where).toBe(401)
      for (const role of roles) {
        const { status } = await sent(cookies.get(role))
        const allowed = contract.allow === 'signed-in' || contract.allow.includes(role)
        if (allowed) expect([401, 403], `${where} as ${role}`).not.toContain(status)
        else expect(status, `${where} as ${role}`).toBe(403)
      }
    }
  }, 60_000)

  it('refuses writes from elsewhere, unmarked ones and other bodies', async () => {
    for (const { contract } of app.routes.filter((r) => isWrite(r.contract))) {
      const where = `${contract.method} ${contract.path}`
      expect((await call(contract)).body.code, where).toBe('marker-missing')
      const cross = await call(contract).set('X-Brimline', '1').set('Sec-Fetch-Site', 'cross-site')
      expect(cross.body.code, where).toBe('cross-site')
      const foreign = await call(contract).set('X-Brimline', '1').set('Origin', 'https://elsewhere.example')
      expect(foreign.body.code, where).toBe('cross-site')
    }
    const text = await supertest(app.app)
      .post('/api/v1/session')
      .set('X-Brimline', '1')
      .set('Content-Type', 'text/plain')
      .send('{}')
    expect(text.status).toBe(415)
    const broken = await supertest(app.app)
      .post('/api/v1/session')
      .set('X-Brimline', '1')
      .set('Content-Type', 'application/json')
      .send('{')
    expect([broken.status, broken.body.code]).toEqual([400, 'unreadable-body'])
  })

  it('marks its replies, forbids caching them and carries the policy headers', async () => {
    const reply = await supertest(app.app).get('/api/v1/session')
    expect(reply.headers).toMatchObject({
      'x-brimline': '1',
      'cache-control': 'no-store',
      'x-content-type-options': 'nosniff',
    })
    expect(reply.get('Content-Security-Policy')).toContain("default-src 'self'")
    expect(reply.get('Permissions-Policy')).toContain('camera=(self)')
    expect((await supertest(app.app).get('/api/v1/nowhere')).body.code).toBe('not-found')
    expect((await supertest(app.app).get('/api/v1/bins/%E0%A4%A')).status).toBe(400)
    expect((await supertest(app.app).get('/healthz')).body).toEqual({ status: 'alive' })
    expect((await supertest(app.app).get('/readyz')).body).toEqual({ status: 'ready' })
  })

  it('stands in the OpenAPI document', async () => {
    const { body } = await supertest(app.app).get('/api/v1/openapi.json')
    expect(body.openapi).toBe('3.1.0')
    for (const { contract } of app.routes) {
      const path = contract.path.replace(/:([A-Za-z]+)/g, '{$1}')
      expect(Object.keys(body.paths[path] ?? {}), path).toContain(contract.method.toLowerCase())
    }
  })
})

describe('over https', () => {
  it('sets a secure cookie bound to the host, whatever stands in front', async () => {
    const { app: secure } = createApp({
      db: app.database.db,
      clock: app.clock,
      dataDir: '.tmp',
      clientDir: null,
      sessionSecrets: ['s'],
      publicUrl: 'https://brimline.example',
      trustProxy: null,
      logLevel: 'silent',
    })
    const reply = await supertest(secure)
      .post('/api/v1/session')
      .set('X-Brimline', '1')
      .send({ email: 'nurse@tallowmere.example', password: 'a long enough one' })
    expect(reply.get('Set-Cookie')![0]).toMatch(
      /^__Host-brimline=.*; Path=\/; Expires=.*; HttpOnly; Secure; SameSite=Lax$/,
    )
  })
})

describe('text', () => {
  it('that is no Unicode is refused at its field', async () => {
    const coordinator = await app.as('coordinator')
    const reply = await coordinator.post('/wards', { code: 'W-1', name: 'half \ud800', kind: 'general' })
    expect([reply.status, reply.body.errors[0].pointer]).toEqual([422, '/name'])
    expect((await coordinator.post('/wards', null)).status).toBe(422)
    expect((await coordinator.get('/bins/abc')).status).toBe(404)
  })
})

describe('refusals', () => {
  it('say in plain words what to do', async () => {
    const coordinator = await app.as('coordinator')
    const details = async (body: object): Promise<Record<string, string>> => {
      const { errors } = (await coordinator.post('/suppliers', body)).body as {
        errors: { pointer: string; detail: string }[]
      }
      return Object.fromEntries(errors.map((e) => [e.pointer, e.detail]))
    }
    expect(
      await details({
        code: 'S',
        name: 7,
        kind: 'friend',
        orderDays: '12',
        cutOff: '9',
        leadWorkingDays: 500,
        minimumOrder: -1,
      }),
    ).toEqual({
      '/name': 'give text',
      '/email': 'not an e-mail address',
      '/kind': 'choose one of: stores, outside',
      '/cutOff': 'a time such as 10:00',
      '/arrivalDays': 'this is needed',
      '/leadWorkingDays': 'at most 120',
      '/minimumOrder': 'at least 0',
    })
  })
})

describe('lists', () => {
  it('page from 1, 50 a page, at most 500', async () => {
    const nurse = await app.as('nurse')
    expect((await nurse.get('/rooms')).body).toEqual({ items: [], total: 0, page: 1, pageSize: 50 })
    expect((await nurse.get('/rooms?pageSize=501')).status).toBe(422)
    expect((await nurse.get('/bins?page=0')).body.errors[0].pointer).toBe('/page')
  })
})

describe('rights in the database', () => {
  it('name every table, and let nobody change what was recorded', async () => {
    const [tables] = (await app.database.db.execute(
      sql`SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE()`,
    )) as unknown as [{ name: string }[]]
    const named = tables
      .map((t) => t.name)
      .filter((n) => n !== '__drizzle_migrations')
      .sort()
    expect(named).toEqual(Object.keys(grants).sort())
    for (const table of ['movements', 'operations', 'audit_log']) {
      for (const statement of [`UPDATE ${table} SET id = id`, `DELETE FROM ${table}`]) {
        const failure = await app.database.db.execute(sql.raw(statement)).then(
          () => null,
          (e: { cause?: { errno?: number } }) => e.cause?.errno,
        )
        // 1142: command denied to user.
        expect(failure, statement).toBe(1142)
      }
    }
  })
})

describe('the problem table', () => {
  it('is sorted, kebab-case and words each entry', () => {
    const codes = Object.keys(problemTable)
    expect(codes).toEqual([...codes].sort())
    for (const [code, entry] of Object.entries(problemTable)) {
      expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/)
      expect(entry.status).toBeGreaterThanOrEqual(400)
      expect(entry.detail).toMatch(/\.$/)
    }
  })
})
