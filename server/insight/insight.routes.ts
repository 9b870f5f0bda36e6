import { readToday } from '#shared/contracts/replenishment.ts'
import type { Routes } from '../http/endpoint.ts'
import * as today from './today.service.ts'

export function insightRoutes(routes: Routes): void {
  routes.read(readToday, ({ tx, clock, actor }) => today.readToday(tx, clock, actor))
}
