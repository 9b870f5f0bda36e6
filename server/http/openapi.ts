import { z } from 'zod'
import type { Contract } from '#shared/contracts/contract.ts'
import { problemTable } from '#shared/contracts/problems.ts'
import type { RegisteredRoute } from './endpoint.ts'

const schemaOf = (schema: z.ZodType, io: 'input' | 'output'): unknown =>
  z.toJSONSchema(schema, { io, unrepresentable: 'any', target: 'draft-2020-12' })

function fieldsOf(schema: z.ZodType, where: 'path' | 'query'): unknown[] {
  const json = schemaOf(schema, 'input') as { properties?: Record<string, unknown>; required?: string[] }
  return Object.entries(json.properties ?? {}).map(([name, field]) => ({
    name,
    in: where,
    required: where === 'path' || (json.required ?? []).includes(name),
    schema: field,
  }))
}

function operation(contract: Contract): unknown {
  const hasBody =
    contract.method !== 'GET' && contract.method !== 'DELETE' && !(contract.body instanceof z.ZodUndefined)
  return {
    summary: contract.summary,
    'x-allow': contract.allow,
    parameters: [...fieldsOf(contract.params, 'path'), ...fieldsOf(contract.query, 'query')],
    ...(hasBody
      ? { requestBody: { content: { 'application/json': { schema: schemaOf(contract.body, 'input') } } } }
      : {}),
    responses: {
      [contract.status]:
        contract.status === 204
          ? { description: 'Done' }
          : {
              description: 'Success',
              content: { 'application/json': { schema: schemaOf(contract.answer, 'output') } },
            },
      default: {
        description: 'Problem',
        content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
      },
    },
  }
}

/** The interface as OpenAPI 3.1, made from the very contracts that validate. */
export function openApi(routes: RegisteredRoute[]): unknown {
  const paths: Record<string, Record<string, unknown>> = {}
  for (const { contract } of routes) {
    const path = contract.path.replace(/:([A-Za-z]+)/g, '{$1}')
    ;(paths[path] ??= {})[contract.method.toLowerCase()] = operation(contract)
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Brimline', version: '1' },
    servers: [{ url: '/api/v1' }],
    paths,
    components: {
      schemas: {
        Problem: {
          type: 'object',
          required: ['type', 'title', 'status', 'detail', 'code'],
          properties: {
            type: { type: 'string' },
            title: { type: 'string' },
            status: { type: 'integer' },
            detail: { type: 'string' },
            code: { enum: Object.keys(problemTable) },
            errors: {
              type: 'array',
              items: { type: 'object', properties: { pointer: { type: 'string' }, detail: { type: 'string' } } },
            },
          },
        },
      },
    },
  }
}
