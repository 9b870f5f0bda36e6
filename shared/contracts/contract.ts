import { z } from 'zod'

/** The four roles; `nurse` is shown as "Ward staff". */
export const Role = z.enum(['nurse', 'coordinator', 'reviewer', 'administrator'])
export type Role = z.infer<typeof Role>

/**
 * Who may call a route. `anyone` needs no session; `signed-in` is every role.
 * This is the permission table: a route exists only through a contract, and a contract cannot be written without it.
 */
export type Allowed = 'anyone' | 'signed-in' | readonly Role[]

export type Method = 'GET' | 'POST' | 'PATCH' | 'DELETE'

/** One call of the API: what validates it, who may make it and what it answers. */
export interface Contract<
  P extends z.ZodType = z.ZodType,
  Q extends z.ZodType = z.ZodType,
  B extends z.ZodType = z.ZodType,
  A extends z.ZodType = z.ZodType,
> {
  method: Method
  /** Below `/api/v1`, Express style: `/bins/:id`. */
  path: string
  summary: string
  allow: Allowed
  params: P
  query: Q
  body: B
  answer: A
  /** Status of success; 204 sends no body. */
  status: number
  /** Entries in the body are judged one by one, also for what text they hold. */
  judgesEntries: boolean
  /** Largest body, in bytes. */
  largest: number
}

/** Room for a hundred entries of a phone; a file needs more. */
const usualLargest = 64 * 1024

interface Parts<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, A extends z.ZodType> {
  method: Method
  path: string
  summary: string
  allow: Allowed
  params?: P
  query?: Q
  body?: B
  answer?: A
  status?: number
  judgesEntries?: boolean
  largest?: number
}

const nothing = z.object({})

/** Fills the parts a contract leaves out: no parameters, no query, no body, an empty answer (204). */
export function contract<
  P extends z.ZodType = typeof nothing,
  Q extends z.ZodType = typeof nothing,
  B extends z.ZodType = z.ZodUndefined,
  A extends z.ZodType = z.ZodUndefined,
>(parts: Parts<P, Q, B, A>): Contract<P, Q, B, A> {
  return {
    method: parts.method,
    path: parts.path,
    summary: parts.summary,
    allow: parts.allow,
    params: parts.params ?? (nothing as unknown as P),
    query: parts.query ?? (nothing as unknown as Q),
    body: parts.body ?? (z.undefined() as unknown as B),
    answer: parts.answer ?? (z.undefined() as unknown as A),
    status: parts.status ?? (parts.answer ? 200 : 204),
    judgesEntries: parts.judgesEntries ?? false,
    largest: parts.largest ?? usualLargest,
  }
}

/** Opaque id, a JSON string. */
export const Id = z.string().regex(/^[1-9][0-9]{0,15}$/, 'not an id')
export type Id = z.infer<typeof Id>

/** UUID made on the device (version 7). */
export const OpId = z
  .string()
  .regex(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/, 'not a UUIDv7')

/** ISO 8601 UTC with milliseconds. */
export const Instant = z.iso.datetime({ offset: false, precision: 3 })
/** YYYY-MM-DD. */
export const DateOnly = z.iso.date()

/** Whole units of use. */
const wholeUnits = 'give a whole number from 0 to 99,999'
export const Quantity = z.number({ error: wholeUnits }).int(wholeUnits).min(0, wholeUnits).max(99_999, wholeUnits)

export const idParams = z.object({ id: Id })

/** Page from 1, 50 a page, at most 500. */
export const pageQuery = {
  page: z.coerce.number().int().min(1).default(1),
  pageSize: z.coerce.number().int().min(1).max(500).default(50),
}

/** The envelope of every list. */
export const listOf = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), total: z.number().int(), page: z.number().int(), pageSize: z.number().int() })

/** Trimmed text with a length limit and a sentence when it is missing. */
export const text = (max: number, min = 1) =>
  z.string().trim().min(min, 'cannot be empty').max(max, `at most ${max} characters`)

/** Short code typed by people: letters, digits, dot and hyphen. */
export const code = z
  .string()
  .trim()
  .regex(/^[A-Za-z0-9][A-Za-z0-9.-]{0,31}$/, 'use letters, digits, dot and hyphen, at most 32')
