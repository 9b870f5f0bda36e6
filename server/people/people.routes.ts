import * as c from '#shared/contracts/people.ts'
import { problem } from '#shared/contracts/problems.ts'
import type { AppDeps } from '../http/context.ts'
import type { Routes } from '../http/endpoint.ts'
import { authenticate, endSession } from '../http/session.ts'
import * as people from './people.service.ts'

/** Where the product is reached, for links in mail. */
function baseUrl(deps: AppDeps, host: string | undefined): string {
  return deps.publicUrl?.replace(/\/$/, '') ?? `http://${host ?? '127.0.0.1'}`
}

export function peopleRoutes(routes: Routes, deps: AppDeps): void {
  routes.steps(c.signIn, async ({ body, req, res, db }) => {
    const actor = await authenticate(deps, req, res, body.email ?? body.staffCode ?? '', body.password)
    if (!actor) throw problem('bad-credentials')
    return { user: await people.readUser(db, actor.id), authzVersion: actor.authzVersion }
  })
  routes.read(c.readSession, async ({ actor, db }) => ({
    user: actor ? await people.readUser(db, actor.id) : null,
    ...(actor ? { authzVersion: actor.authzVersion } : {}),
  }))
  routes.steps(c.signOut, async ({ req, res }) => {
    await endSession(req)
    res.clearCookie('brimline.sid', { path: '/' })
    res.clearCookie('__Host-brimline', { path: '/', secure: true })
    return undefined
  })
  routes.write(c.changePassword, async ({ tx, clock, actor, body, req }) => {
    await people.changePassword(tx, clock, actor, { ...body, sid: req.sessionID })
    return undefined
  })
  routes.write(c.askReset, async ({ tx, clock, body, req }) => {
    await people.askReset(tx, clock, body.email, baseUrl(deps, req.get('host')))
    return { detail: 'If this address is known here, a link is on its way.' }
  })
  routes.write(c.useReset, async ({ tx, clock, params, body }) => {
    await people.useReset(tx, clock, params.token, body.newPassword)
    return undefined
  })
  routes.read(c.listUsers, ({ tx, query }) =>
    people.listUserRecords(tx, { ...query, retired: query.retired === 'yes' }),
  )
  routes.write(c.createUser, ({ tx, clock, actor, body }) => people.createUser(tx, clock, actor.id, body))
  routes.write(c.updateUser, ({ tx, clock, actor, params, body }) =>
    people.updateUser(tx, clock, actor, Number(params.id), body),
  )
}
