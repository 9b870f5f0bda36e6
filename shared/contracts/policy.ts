import { z } from 'zod'
import { contract, DateOnly, Id, idParams, Instant, listOf, pageQuery, text } from './contract.ts'
import { Bin } from './bins.ts'

const everyRole = 'signed-in' as const

/** A policy as computed; `shared/policy/policy-result.ts` holds the full type. */
export const ComputedPolicy = z.looseObject({
  method: z.string(),
  reorderPoint: z.number().int().nullable(),
  parLevel: z.number().int().nullable(),
  orderQuantity: z.number().int().nullable(),
})

export const ServiceLevel = z.object({
  target: z.number(),
  source: z.enum(['bin-override', 'item-override', 'class', 'hospital']),
  reviewBy: DateOnly.nullable(),
  reason: z.string().nullable(),
  policyReference: z.string().nullable(),
})

export const PolicyInterval = z.object({
  openingOpId: z.string(),
  closingOpId: z.string(),
  openedAt: Instant,
  closedAt: Instant,
  days: z.number(),
  quantity: z.number().int(),
  used: z.boolean(),
  censored: z.boolean(),
  why: z.string().nullable(),
})

export const BinPolicy = z.object({
  binId: Id,
  mode: z.enum(['as-before', 'beside', 'calculated']),
  reorderPoint: z.number().int().nullable(),
  parLevel: z.number().int().nullable(),
  orderQuantity: z.number().int().nullable(),
  since: Instant.nullable(),
  computed: ComputedPolicy.nullable(),
  pending: z
    .object({
      reorderPoint: z.number().int(),
      parLevel: z.number().int().nullable(),
      causes: z.array(z.object({ what: z.string(), units: z.number() })),
      waitsFor: z.string(),
    })
    .nullable(),
  input: z.unknown(),
  asOf: Instant.nullable(),
  serviceLevel: ServiceLevel,
  intervals: z.array(PolicyInterval),
  explanation: z.array(z.object({ label: z.string(), formula: z.string(), value: z.string() })),
  protection: z
    .object({
      countedAt: Instant,
      firstOrderBy: Instant,
      firstArrival: Instant,
      nextOrderBy: Instant,
      nextArrival: Instant,
      days: z.number(),
    })
    .nullable(),
  proposed: z
    .object({
      id: Id,
      level: z.number(),
      reason: z.string(),
      policyReference: z.string(),
      reviewBy: DateOnly,
      byName: z.string(),
      own: z.boolean(),
    })
    .nullable(),
  /** How the figures in force moved, newest first. */
  history: z.array(
    z.object({
      reorderPoint: z.number().int().nullable(),
      parLevel: z.number().int().nullable(),
      target: z.number(),
      source: ServiceLevel.shape.source,
      method: z.string(),
      cause: z.string(),
      since: Instant,
    }),
  ),
})
export type BinPolicy = z.infer<typeof BinPolicy>

export const readBinPolicy = contract({
  method: 'GET',
  path: '/bins/:id/policy',
  summary: 'How much is enough for one bin, and why',
  allow: everyRole,
  params: idParams,
  answer: BinPolicy,
})

export const previewPolicy = contract({
  method: 'POST',
  path: '/policy/preview',
  summary: 'Works out a policy from given figures; stores nothing',
  allow: ['coordinator', 'reviewer', 'administrator'],
  body: z.record(z.string(), z.unknown()),
  answer: ComputedPolicy,
})

export const setServiceLevel = contract({
  method: 'POST',
  path: '/bins/:id/service-level',
  summary: 'Set the aim of one bin, or propose it',
  allow: ['reviewer', 'coordinator'],
  params: idParams,
  body: z.strictObject({ level: z.number(), reason: text(500), policyReference: text(120), reviewBy: DateOnly }),
  answer: BinPolicy,
  status: 201,
})
export const endServiceLevel = contract({
  method: 'DELETE',
  path: '/bins/:id/service-level',
  summary: 'End the aim set for one bin; its class level holds again',
  allow: ['reviewer'],
  params: idParams,
  answer: BinPolicy,
})
export const decideProposal = contract({
  method: 'POST',
  path: '/service-level-proposals/:id/decision',
  summary: 'Approve or decline a proposed aim; never one’s own',
  allow: ['reviewer'],
  params: idParams,
  body: z.strictObject({ decision: z.enum(['approve', 'decline']), note: z.string().trim().max(300).default('') }),
  answer: BinPolicy,
})

/** A person's yes to a calculation that stands below what somebody entered. */
export const acceptCalculated = contract({
  method: 'POST',
  path: '/bins/:id/accept-calculated',
  summary: 'Keep this place by what is worked out from now on; vital items by the reviewer',
  allow: ['coordinator', 'reviewer'],
  params: idParams,
  answer: BinPolicy,
})

/** A hard minimum of one bin, apart from what is worked out. */
export const setPinnedFloor = contract({
  method: 'POST',
  path: '/bins/:id/pinned-floor',
  summary: 'Never below this many, whatever is worked out',
  allow: ['reviewer'],
  params: idParams,
  body: z.strictObject({ floor: z.number().int().min(0).max(99_999).nullable(), reason: text(300) }),
  answer: BinPolicy,
})

export const ReviewRow = Bin.extend({
  target: z.number(),
  source: z.enum(['bin-override', 'item-override', 'class', 'hospital']),
  reviewBy: DateOnly.nullable(),
  /** due: on or past its date; this-week: within seven days. */
  review: z.enum(['due', 'this-week', 'later', 'none']),
  intervals: z.number().int(),
  days: z.number(),
  runOuts: z.object({ found: z.number().int(), cycles: z.number().int() }),
  proposal: z.object({ id: Id, level: z.number(), byName: z.string(), own: z.boolean() }).nullable(),
  warnings: z.array(z.string()),
})
export type ReviewRow = z.infer<typeof ReviewRow>
export const listReview = contract({
  method: 'GET',
  path: '/review',
  summary: 'Places with their aims: due for review first, then proposed, then vital',
  allow: ['reviewer', 'coordinator', 'administrator'],
  query: z.object({
    ...pageQuery,
    show: z.enum(['due', 'proposed', 'vital', 'moved', 'all']).default('vital'),
    roomId: Id.optional(),
    q: z.string().trim().max(100).optional(),
  }),
  answer: listOf(ReviewRow),
})
