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

/**
 * A part of a move of the reorder point: `use`, `rhythm` (days between counts, from and to), `days` (days to cover, from
 * and to), `weekdays`, `delivery`, `planned-change`, `like-wards`, `aim`, `limits`, or `entered`.
 */
export const CauseOfMove = z.object({
  what: z.string(),
  units: z.number(),
  from: z.number().optional(),
  to: z.number().optional(),
})
export type CauseOfMove = z.infer<typeof CauseOfMove>

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
      causes: z.array(CauseOfMove),
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
  /** Estimated chance that one delivery cycle does not run out with the figure in force; null where nobody can say. */
  sureInForce: z.number().nullable(),
  /** Planned counts of late that were kept. */
  countsKept: z.object({ kept: z.number().int(), of: z.number().int() }).nullable(),
  /** How use comes, after Syntetos, Boylan and Croston; null with too few counts. */
  demandClass: z.enum(['smooth', 'erratic', 'intermittent', 'lumpy']).nullable(),
  /** Nothing used since then, for long. */
  useStoppedSince: Instant.nullable(),
  /** Stretches so unlike the rest that a person is asked what they were. */
  questions: z.array(
    z.object({
      closingOpId: z.string(),
      from: Instant,
      to: Instant,
      quantity: z.number(),
      expected: z.number(),
    }),
  ),
  /** Stretches of time that are left out, a start of the history, and answers to questions. */
  exclusions: z.array(
    z.object({
      id: Id,
      kind: z.enum(['excluded', 'history-start', 'real']),
      from: Instant,
      to: Instant.nullable(),
      reason: z.string(),
      byName: z.string(),
      at: Instant,
    }),
  ),
  /** Like wards that help, with the share of this place's own counts; null where none do. */
  pool: z
    .object({
      basis: z.enum(['item', 'category']),
      /** Weight of the place's own counts in the rate, 0 to 1; null where only the spread is shared. */
      ownShare: z.number().nullable(),
      wards: z.array(
        z.object({ wardId: Id, name: z.string(), meanPerDay: z.number(), own: z.boolean(), leftOut: z.boolean() }),
      ),
    })
    .nullable(),
  /** Planned changes that bear on it now or within one protection time. */
  changes: z.array(
    z.object({
      id: Id,
      name: z.string(),
      kind: z.enum(['factor', 'cases', 'closed']),
      startsOn: DateOnly,
      endsOn: DateOnly.nullable(),
      entered: z.number().nullable(),
      seen: z.number().nullable(),
    }),
  ),
  /** Deliveries seen beside the stated time. */
  leadTimes: z.object({ seen: z.number().int(), statedDays: z.number() }).nullable(),
  /** How the figures in force moved, newest first. */
  history: z.array(
    z.object({
      reorderPoint: z.number().int().nullable(),
      parLevel: z.number().int().nullable(),
      target: z.number(),
      source: ServiceLevel.shape.source,
      method: z.string(),
      cause: z.string(),
      /** How much each group of inputs moved it; empty where a person's figure took over. */
      causes: z.array(CauseOfMove),
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

const whoMayExclude = ['coordinator', 'reviewer', 'administrator'] as const
export const addExclusion = contract({
  method: 'POST',
  path: '/bins/:id/exclusions',
  summary: 'Leave a stretch of time out, start the history anew, or say that an unusual stretch was real',
  allow: whoMayExclude,
  params: idParams,
  body: z.strictObject({
    kind: z.enum(['excluded', 'history-start', 'real']),
    from: Instant,
    /** End of the stretch; a start of the history has none. */
    to: Instant.nullable().default(null),
    reason: text(300),
  }),
  answer: BinPolicy,
  status: 201,
})
export const endExclusion = contract({
  method: 'POST',
  path: '/exclusions/:id/end',
  summary: 'Let it count again; the record of it stays',
  allow: whoMayExclude,
  params: idParams,
  body: z.strictObject({ reason: text(300) }),
  answer: BinPolicy,
})
export const setPoolWard = contract({
  method: 'POST',
  path: '/bins/:id/like-wards',
  summary: 'Leave a like ward out of what helps this item, or take it in again',
  allow: ['coordinator', 'reviewer'],
  params: idParams,
  body: z.strictObject({ wardId: Id, leftOut: z.boolean(), reason: text(300) }),
  answer: BinPolicy,
})

/** The night's run over every place. */
export const PolicyRun = z.object({
  startedAt: Instant,
  finishedAt: Instant.nullable(),
  bins: z.number().int(),
  done: z.number().int(),
  changed: z.number().int(),
})
export const readPolicyRun = contract({
  method: 'GET',
  path: '/policy/run',
  summary: 'How far the newest run over every place has come; null before the first',
  allow: ['coordinator', 'reviewer', 'administrator'],
  answer: z.object({ run: PolicyRun.nullable() }),
})

/** What the aims of one class come to. */
export const ClassOutlook = z.object({
  ved: z.enum(['V', 'E', 'D']),
  target: z.number(),
  places: z.number().int(),
  /** Places whose figures are worked out, on which the rest rests. */
  workedOut: z.number().int(),
  /** Estimated run-outs a year over these places. */
  runOutsPerYear: z.number(),
})
export type ClassOutlook = z.infer<typeof ClassOutlook>
export const readClassOutlook = contract({
  method: 'GET',
  path: '/review/classes',
  summary: 'What the aims of each class come to in a year (an estimate)',
  allow: ['reviewer', 'coordinator', 'administrator'],
  answer: z.object({ items: z.array(ClassOutlook) }),
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
  /** A stretch of use waits for a person's word. */
  questions: z.number().int(),
})
export type ReviewRow = z.infer<typeof ReviewRow>
export const listReview = contract({
  method: 'GET',
  path: '/review',
  summary: 'Places with their aims: due for review first, then proposed, then vital',
  allow: ['reviewer', 'coordinator', 'administrator'],
  query: z.object({
    ...pageQuery,
    show: z.enum(['due', 'proposed', 'vital', 'moved', 'asked', 'all']).default('vital'),
    roomId: Id.optional(),
    q: z.string().trim().max(100).optional(),
  }),
  answer: listOf(ReviewRow),
})
