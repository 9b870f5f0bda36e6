import compression from 'compression'
import express, { Router, type Express } from 'express'
import helmet from 'helmet'
import pino from 'pino'
import { pinoHttp } from 'pino-http'
import { problem } from '#shared/contracts/problems.ts'
import { catalogueRoutes } from './catalogue/catalogue.routes.ts'
import { countsRoutes } from './counts/counts.routes.ts'
import type { AppDeps } from './http/context.ts'
import { isReady } from './http/readiness.ts'
import { Routes, type RegisteredRoute } from './http/endpoint.ts'
import { markReply, permissions, sameOriginWrites } from './http/guards.ts'
import { insightRoutes } from './insight/insight.routes.ts'
import { openApi } from './http/openapi.ts'
import { problemHandler } from './http/problem-handler.ts'
import { sessions } from './http/session.ts'
import { clientFiles } from './http/static.ts'
import { peopleRoutes } from './people/people.routes.ts'
import { policyRoutes } from './policy/policy.routes.ts'
import { replenishmentRoutes } from './replenishment/replenishment.routes.ts'
import { reviewRoutes } from './review/review.routes.ts'

/** The table of contents: what every request passes, in order, and the list of capabilities. */
export function createApp(deps: AppDeps): { app: Express; routes: RegisteredRoute[] } {
  const app = express()
  const log = pino({
    level: deps.logLevel,
    redact: ['req.headers.cookie', 'req.headers.authorization', 'res.headers["set-cookie"]'],
  })
  app.disable('x-powered-by')
  app.set('query parser', 'simple')
  if (deps.trustProxy) app.set('trust proxy', /^\d+$/.test(deps.trustProxy) ? Number(deps.trustProxy) : deps.trustProxy)
  app.use(pinoHttp({ logger: log }))
  app.use(helmet(contentPolicy(deps)), permissions)

  app.get('/healthz', markReply, (_req, res) => {
    res.json({ status: 'alive' })
  })
  app.get('/readyz', markReply, async (_req, res) => {
    await isReady(deps.db)
    res.json({ status: 'ready' })
  })
  if (deps.clientDir) app.use(clientFiles(deps.clientDir))

  const api = Router()
  const routes = new Routes(api, deps)
  app.use('/api/v1', compression(), markReply, sameOriginWrites, ...sessions(deps), api)
  peopleRoutes(routes, deps)
  catalogueRoutes(routes)
  countsRoutes(routes)
  policyRoutes(routes)
  reviewRoutes(routes)
  replenishmentRoutes(routes)
  insightRoutes(routes)
  api.get('/openapi.json', (_req, res) => {
    res.json(openApi(routes.registered))
  })
  app.use('/api', (_req, _res, next) => next(problem('not-found', 'There is no such address.')))
  app.use(problemHandler(log))
  return { app, routes: routes.registered }
}

function contentPolicy(deps: AppDeps) {
  const https = deps.publicUrl?.startsWith('https://') ?? false
  return {
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        baseUri: ["'none'"],
        objectSrc: ["'none'"],
        frameAncestors: ["'none'"],
        formAction: ["'self'"],
        scriptSrc: ["'self'"],
        scriptSrcAttr: ["'none'"],
        styleSrc: ["'self'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        manifestSrc: ["'self'"],
        workerSrc: ["'self'"],
      },
    },
    strictTransportSecurity: https ? { maxAge: 31_536_000 } : false,
    referrerPolicy: { policy: 'same-origin' as const },
  }
}
