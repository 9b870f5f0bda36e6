import { listMovements } from '#shared/contracts/bins.ts'
import * as c from '#shared/contracts/counts.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Routes } from '../http/endpoint.ts'
import { momentOf, viewBin } from './bin-view.service.ts'
import { syncOperations } from './counts.service.ts'
import * as movements from './movements.service.ts'
import * as snapshots from './snapshot.service.ts'

export function countsRoutes(routes: Routes): void {
  routes.steps(c.syncOperations, ({ db, clock, actor, body }) => syncOperations(db, clock, actor, body))
  routes.read(c.readSnapshot, async ({ db, clock, actor, query }) =>
    snapshots.readSnapshot(db, clock, actor, await readHospital(db), query),
  )
  routes.read(listMovements, async ({ db, clock, actor, params, query }) => {
    const binId = Number(params.id)
    await viewBin(db, momentOf(clock, 'utc'), actor, binId)
    return movements.listMovements(db, clock, actor, binId, query)
  })
}
