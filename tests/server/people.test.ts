import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import supertest from 'supertest'
import { mailOutbox } from '#server/mail/mail.tables.ts'
import { users } from '#server/people/people.tables.ts'
import { password, startTestApp, type TestApp } from '../support/app.ts'

let app: TestApp
beforeAll(async () => {
  app = await startTestApp()
})
afterAll(() => app.close())

const minutes = (n: number): void => app.clock.set(new Date(app.clock.now().getTime() + n * 60_000))
const attempt = (fields: object) => supertest(app.app).post('/api/v1/session').set('X-Brimline', '1').send(fields)

describe('signing in', () => {
  it('takes the e-mail or the staff code, in any case, and says who it is', async () => {
    const byMail = await attempt({ email: 'Nurse@Tallowmere.example', password })
    expect(byMail.status).toBe(201)
    expect(byMail.body.user).toMatchObject({ name: 'Test nurse', role: 'nurse', roomIds: null })
    expect(byMail.get('Set-Cookie')![0]).toMatch(/^brimline\.sid=.*; Path=\/; Expires=.*; HttpOnly; SameSite=Lax$/)
    expect((await attempt({ staffCode: 'T-nurse', password })).status).toBe(201)
  })

  it('stores argon2id with the strength asked for', async () => {
    const [row] = await app.database.db.select().from(users)
    expect(row!.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
  })

  it('says the same for a wrong password and an unknown person', async () => {
    const wrong = await attempt({ email: 'nurse@tallowmere.example', password: 'not it' })
    const unknown = await attempt({ email: 'nobody@tallowmere.example', password: 'not it' })
    expect([wrong.status, wrong.body]).toEqual([401, unknown.body])
    expect(wrong.get('Content-Type')).toContain('application/problem+json')
    expect(wrong.body).toMatchObject({ type: '/problems/bad-credentials', code: 'bad-credentials', status: 401 })
  })

  it('names the field of a malformed request', async () => {
    const neither = await attempt({ password })
    expect([neither.status, neither.body.errors[0].pointer]).toEqual([422, '/email'])
    expect((await attempt({ email: 'a@b.example', password, role: 'administrator' })).status).toBe(422)
  })

  it('slows guessing down per account and lets others and the waiting owner in', async () => {
    for (let i = 0; i < 10; i += 1) await attempt({ email: 'reviewer@tallowmere.example', password: `guess ${i}` })
    const shut = await attempt({ email: 'reviewer@tallowmere.example', password })
    expect([shut.status, shut.body.code]).toEqual([429, 'too-many-attempts'])
    expect(Number(shut.get('Retry-After'))).toBeGreaterThan(0)
    expect((await attempt({ email: 'coordinator@tallowmere.example', password })).status).toBe(201)
    minutes(16)
    expect((await attempt({ email: 'reviewer@tallowmere.example', password })).status).toBe(201)
  }, 60_000)

  it('counts tries made at once, and by either name, as tries at one person', async () => {
    minutes(20)
    const tries = await Promise.all(
      Array.from({ length: 24 }, (_, i) =>
        attempt({
          ...(i % 2 ? { staffCode: 'T-administrator' } : { email: 'administrator@tallowmere.example' }),
          password: `guess ${i}`,
        }),
      ),
    )
    expect(tries.filter((t) => t.status === 429).length).toBeGreaterThanOrEqual(24 - 10)
    minutes(16)
    expect((await attempt({ staffCode: 'T-administrator', password })).status).toBe(201)
  }, 60_000)

  it('makes the session id anew and forgets it at sign-out', async () => {
    const agent = supertest.agent(app.app)
    const first = await agent.post('/api/v1/session').set('X-Brimline', '1').send({ staffCode: 'T-nurse', password })
    const again = await agent.post('/api/v1/session').set('X-Brimline', '1').send({ staffCode: 'T-nurse', password })
    const cookie = (reply: typeof first): string => reply.get('Set-Cookie')![0]!.split(';')[0]!
    expect(cookie(again)).not.toBe(cookie(first))
    const old = await supertest(app.app).get('/api/v1/session').set('Cookie', cookie(first))
    expect(old.body.user).toBeNull()
    await agent.delete('/api/v1/session').set('X-Brimline', '1').expect(204)
    const after = await supertest(app.app).get('/api/v1/rooms').set('Cookie', cookie(again))
    expect([after.status, after.body.code]).toEqual([401, 'not-signed-in'])
  })

  it('ends a session after a shift, and a manager’s screen after half an hour', async () => {
    const nurse = await app.signedIn('T-nurse')
    const reviewer = await app.signedIn('T-reviewer')
    minutes(31)
    expect((await nurse.get('/rooms')).status).toBe(200)
    expect((await reviewer.get('/rooms')).status).toBe(401)
    minutes(15 * 60)
    expect((await nurse.get('/rooms')).status).toBe(401)
  })
})

describe('passwords', () => {
  it('changes with the present one and ends the other sessions', async () => {
    const here = await app.signedIn('T-nurse')
    const there = await app.signedIn('T-nurse')
    expect(
      (await here.post('/session/password', { currentPassword: 'wrong', newPassword: 'something longer' })).body
        .errors[0].pointer,
    ).toBe('/currentPassword')
    expect(
      (await here.post('/session/password', { currentPassword: password, newPassword: 'password123' })).status,
    ).toBe(422)
    expect(
      (await here.post('/session/password', { currentPassword: password, newPassword: 'something longer' })).status,
    ).toBe(204)
    expect([(await here.get('/rooms')).status, (await there.get('/rooms')).status]).toEqual([200, 401])
    await here.post('/session/password', { currentPassword: 'something longer', newPassword: password })
  })

  it('is set anew by a mailed link, once', async () => {
    const unknown = await app.anyone.post('/password-resets', { email: 'nobody@tallowmere.example' })
    const known = await app.anyone.post('/password-resets', { email: 'nurse@tallowmere.example' })
    expect([known.status, known.body]).toEqual([202, unknown.body])
    const mails = await app.database.db.select().from(mailOutbox)
    expect(mails).toHaveLength(1)
    const token = /password-reset\/(\S+)/.exec(mails[0]!.body)![1]!
    expect((await app.anyone.post(`/password-resets/${token}`, { newPassword: 'nurse' })).status).toBe(422)
    expect((await app.anyone.post(`/password-resets/${token}`, { newPassword: 'fresh and long' })).status).toBe(204)
    expect((await app.anyone.post(`/password-resets/${token}`, { newPassword: 'fresh and long' })).body.code).toBe(
      'link-used-up',
    )
    expect((await attempt({ staffCode: 'T-nurse', password: 'fresh and long' })).status).toBe(201)
  })
})

describe('people', () => {
  it('are added, changed and retired by the administrator alone', async () => {
    const admin = await app.signedIn('T-administrator')
    const fields = {
      name: 'New Starter',
      email: 'starter@tallowmere.example',
      staffCode: 'N-7',
      role: 'nurse',
      roomIds: [],
      password: 'starting out',
    }
    const coordinator = await app.signedIn('T-coordinator')
    expect((await coordinator.post('/users', fields)).status).toBe(403)
    const made = await admin.post('/users', fields)
    expect(made.status).toBe(201)
    expect((await admin.post('/users', { ...fields, email: 'b@tallowmere.example' })).body.errors[0].pointer).toBe(
      '/staffCode',
    )
    expect((await admin.patch(`/users/${made.body.id}`, { roomIds: ['999999'] })).body.errors[0].pointer).toBe(
      '/roomIds/0',
    )
    const starter = await app.signedIn('N-7', 'starting out')
    expect((await admin.patch(`/users/${made.body.id}`, { role: 'coordinator' })).body.role).toBe('coordinator')
    expect((await starter.get('/session')).body).toMatchObject({ user: { role: 'coordinator' }, authzVersion: 2 })
    await admin.patch(`/users/${made.body.id}`, { retired: true })
    expect((await starter.get('/session')).body.user).toBeNull()
    expect((await attempt({ staffCode: 'N-7', password: 'starting out' })).status).toBe(401)
    expect((await admin.patch(`/users/${admin.userId}`, { role: 'nurse' })).status).toBe(403)
  })
})
