import * as p from '#shared/contracts/planned-changes.ts'
import { previewPolicy, readPolicyRun } from '#shared/contracts/policy.ts'
import type { Routes } from '../http/endpoint.ts'
import * as changes from './planned-changes.service.ts'
import { preview } from './preview.service.ts'
import { readRun } from './runs.service.ts'

export function policyRoutes(routes: Routes): void {
  routes.read(previewPolicy, ({ body }) => Promise.resolve(preview(body)))
  routes.read(readPolicyRun, ({ tx }) => readRun(tx))

  routes.read(p.listPlannedChanges, ({ tx, clock, actor, query }) => changes.listChanges(tx, clock, actor, query))
  routes.read(p.readLastYear, ({ tx, actor, query }) => changes.readLastYear(tx, actor, query))
  routes.write(p.createPlannedChange, ({ tx, clock, actor, body }) => changes.createChange(tx, clock, actor, body))
  routes.write(p.updatePlannedChange, ({ tx, clock, actor, params, body }) =>
    changes.updateChange(tx, clock, actor, Number(params.id), body),
  )
  routes.write(p.takeBackPlannedChange, ({ tx, clock, actor, params, body }) =>
    changes.takeBack(tx, clock, actor, Number(params.id), body.reason),
  )
}
