import * as c from '#shared/contracts/policy.ts'
import type { Routes } from '../http/endpoint.ts'
import { addExclusion, endExclusion } from '../policy/exclusions.service.ts'
import { setPoolWard } from '../policy/pools.service.ts'
import { readBinPolicy } from './bin-policy.service.ts'
import { readClassOutlook } from './outlook.service.ts'
import * as review from './review.service.ts'

export function reviewRoutes(routes: Routes): void {
  routes.read(c.readBinPolicy, ({ tx, clock, actor, params }) => readBinPolicy(tx, clock, actor, Number(params.id)))
  routes.write(c.setServiceLevel, async ({ tx, clock, actor, params, body, res }) => {
    const { inForce } = await review.setLevel(tx, clock, actor, Number(params.id), body)
    if (!inForce) res.status(202)
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.write(c.endServiceLevel, async ({ tx, clock, actor, params }) => {
    await review.endLevel(tx, clock, actor, Number(params.id))
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.write(c.decideProposal, async ({ tx, clock, actor, params, body }) => {
    const binId = await review.decide(tx, clock, actor, Number(params.id), body)
    return readBinPolicy(tx, clock, actor, binId)
  })
  routes.write(c.acceptCalculated, async ({ tx, clock, actor, params }) => {
    await review.acceptCalculated(tx, clock, actor, Number(params.id))
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.write(c.setPinnedFloor, async ({ tx, clock, actor, params, body }) => {
    await review.setFloor(tx, clock, actor, Number(params.id), body)
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.write(c.addExclusion, async ({ tx, clock, actor, params, body }) => {
    await addExclusion(tx, clock, actor, Number(params.id), body)
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.write(c.endExclusion, async ({ tx, clock, actor, params, body }) => {
    const binId = await endExclusion(tx, clock, actor, Number(params.id), body.reason)
    return readBinPolicy(tx, clock, actor, binId)
  })
  routes.write(c.setPoolWard, async ({ tx, clock, actor, params, body }) => {
    await setPoolWard(tx, clock, actor, Number(params.id), body)
    return readBinPolicy(tx, clock, actor, Number(params.id))
  })
  routes.read(c.readClassOutlook, ({ tx, clock, actor }) => readClassOutlook(tx, clock, actor))
  routes.read(c.listReview, ({ tx, clock, actor, query }) => review.listReview(tx, clock, actor, query))
}
