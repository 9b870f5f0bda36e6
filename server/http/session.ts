import session from 'express-session'
import type { NextFunction, Request, RequestHandler, Response } from 'express'
import passport from 'passport'
import { Strategy as LocalStrategy } from 'passport-local'
import { findActor, checkSignIn, toActor } from '../people/people.service.ts'
import type { Actor, AppDeps } from './context.ts'
import { DatabaseSessionStore, sessionHours } from './session-store.ts'

/** Managers' screens lock themselves after half an hour without a request. Source: OWASP Session Management Cheat Sheet. */
const idleMinutes: Partial<Record<Actor['role'], number>> = { reviewer: 30, administrator: 30 }

declare module 'express-session' {
  interface SessionData {
    /** Epoch ms by the injected clock of the last request. */
    seenAt?: number
  }
}

/** Session cookie, its store, and the person behind it. Only the API reads it. */
export function sessions(deps: AppDeps): RequestHandler[] {
  const secure = deps.publicUrl?.startsWith('https://') ?? false
  const auth = new passport.Passport()
  auth.serializeUser((user, done) => done(null, (user as Actor).id))
  auth.deserializeUser((id, done) => {
    findActor(deps.db, Number(id)).then(
      (actor) => done(null, actor ?? false),
      (error: unknown) => done(error),
    )
  })
  auth.use(
    new LocalStrategy(
      { usernameField: 'email', passReqToCallback: true, session: true },
      (req, account, password, done) => {
        const by = account.includes('@') ? { email: account } : { staffCode: account }
        checkSignIn(deps.db, deps.clock, by, password, req.ip ?? '').then(
          (person) => done(null, person ? toActor(person) : false),
          (error: unknown) => done(error),
        )
      },
    ),
  )
  authenticators.set(deps, auth)
  return [
    ...(secure ? [overHttps] : []),
    session({
      name: secure ? '__Host-brimline' : 'brimline.sid',
      secret: deps.sessionSecrets,
      store: new DatabaseSessionStore(deps.db, deps.clock),
      resave: false,
      saveUninitialized: false,
      rolling: false,
      cookie: { httpOnly: true, sameSite: 'lax', path: '/', secure, maxAge: sessionHours * 3_600_000 },
    }),
    auth.initialize() as RequestHandler,
    auth.session() as RequestHandler,
    idleLock(deps),
  ]
}

/** PUBLIC_URL says how people come here, whatever the proxy in front passes on. */
const overHttps: RequestHandler = (req, _res, next) => {
  Object.defineProperty(req, 'secure', { value: true, configurable: true })
  next()
}

const authenticators = new WeakMap<AppDeps, InstanceType<typeof passport.Passport>>()

/** Signs in by e-mail or staff code through passport; the session id is made anew. @returns null when they do not match */
export function authenticate(
  deps: AppDeps,
  req: Request,
  res: Response,
  account: string,
  password: string,
): Promise<Actor | null> {
  const auth = authenticators.get(deps)
  if (!auth) throw new Error('sessions() comes first')
  // The strategy reads its fields from the body, whatever form they came in.
  const asked = Object.create(req, { body: { value: { email: account, password } } }) as Request
  return new Promise((resolve, reject) => {
    const done = (error: unknown, actor?: unknown): void => {
      if (error) return reject(error as Error)
      if (!actor) return resolve(null)
      req.logIn(actor as Express.User, (failed) => {
        if (failed) return reject(failed as Error)
        req.session.seenAt = deps.clock.now().getTime()
        resolve(actor as Actor)
      })
    }
    ;(auth.authenticate('local', done) as RequestHandler)(asked, res, (error?: unknown) => reject(error as Error))
  })
}

export function endSession(req: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.destroy((error?: unknown) => (error ? reject(error as Error) : resolve()))
  })
}

function idleLock(deps: AppDeps) {
  return (req: Request, _res: Response, next: NextFunction): void => {
    const actor = req.user as Actor | undefined
    const limit = actor && idleMinutes[actor.role]
    if (!actor || !limit) return next()
    const now = deps.clock.now().getTime()
    const seen = req.session.seenAt ?? now
    if (now - seen <= limit * 60_000) {
      if (now - seen > 60_000 || req.session.seenAt === undefined) req.session.seenAt = now
      return next()
    }
    req.user = undefined
    endSession(req).then(() => next(), next)
  }
}
