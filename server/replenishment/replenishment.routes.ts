import * as c from '#shared/contracts/replenishment.ts'
import type { Routes } from '../http/endpoint.ts'
import { readGapAhead } from './gap.service.ts'
import * as orders from './orders.service.ts'
import { readWorklist } from './worklist.service.ts'

export function replenishmentRoutes(routes: Routes): void {
  routes.read(c.readWorklist, ({ tx, clock, actor, query }) => readWorklist(tx, clock, actor, query))
  routes.read(c.readGapAhead, ({ tx, clock, actor, query }) => readGapAhead(tx, clock, actor, query))
  routes.read(c.listOrders, ({ tx, query }) => orders.listOrders(tx, query))
  routes.read(c.readOrder, ({ tx, params }) => orders.readOrder(tx, Number(params.id)))
  routes.write(c.createOrder, ({ tx, clock, actor, body }) => orders.createOrder(tx, clock, actor, body))
  routes.write(c.updateOrder, ({ tx, clock, actor, params, body }) =>
    orders.updateOrder(tx, clock, actor, Number(params.id), body),
  )
  routes.write(c.sendOrder, ({ tx, clock, actor, params }) => orders.sendOrder(tx, clock, actor, Number(params.id)))
  routes.write(c.acknowledgeOrder, ({ tx, clock, actor, params, body }) =>
    orders.acknowledgeOrder(tx, clock, actor, Number(params.id), body?.expectedOn),
  )
  routes.write(c.cancelOrder, ({ tx, clock, actor, params, body }) =>
    orders.cancelOrder(tx, clock, actor, Number(params.id), body?.reason),
  )
}
