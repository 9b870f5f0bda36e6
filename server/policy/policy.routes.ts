import { previewPolicy } from '#shared/contracts/policy.ts'
import type { Routes } from '../http/endpoint.ts'
import { preview } from './preview.service.ts'

export function policyRoutes(routes: Routes): void {
  routes.read(previewPolicy, ({ body }) => Promise.resolve(preview(body)))
}
