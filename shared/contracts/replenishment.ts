import { z } from 'zod'
import { Bin } from './bins.ts'
import { contract, DateOnly, Id, idParams, Instant, listOf, pageQuery } from './contract.ts'

const coordinator = ['coordinator'] as const

export const WorklistRow = Bin.extend({
  binId: Id,
  supplierId: Id.nullable(),
  supplierName: z.string().nullable(),
  /** Last moment to order for `nextArrival`. */
  orderBy: Instant.nullable(),
  /** Estimated chance of running out before the next possible arrival. */
  risk: z.number(),
  /** Days on which it is likely out: an estimated range that holds 8 times in 10; null is "not within a month". */
  outBy: z.object({ early: DateOnly.nullable(), late: DateOnly.nullable() }),
  nextArrival: Instant.nullable(),
  suggested: z.object({ packs: z.number().int(), packSize: z.number().int(), units: z.number().int() }),
  /** Plain sentences: what it works out at and why. */
  why: z.array(z.string()),
  /** Draft orders that hold this bin already. */
  inDraft: z.object({ orderId: Id, number: z.string() }).nullable(),
  /** Of one unit of use. */
  price: z.number().nullable(),
})
export type WorklistRow = z.infer<typeof WorklistRow>
export const readWorklist = contract({
  method: 'GET',
  path: '/worklist',
  summary: 'Exactly the bins in state below, most at risk first',
  allow: coordinator,
  query: z.object({ ...pageQuery, roomId: Id.optional(), supplierId: Id.optional() }),
  answer: listOf(WorklistRow),
})

/** Bins that would not last over a holiday gap, spread over the orders that are left before it. */
export const GapAhead = z.object({
  gap: z
    .object({
      supplierId: Id,
      supplierName: z.string(),
      name: z.string(),
      from: DateOnly,
      to: DateOnly,
      lastOrderBy: Instant,
      lastArrival: Instant,
      nextArrival: Instant,
    })
    .nullable(),
  slots: z.array(
    z.object({
      orderBy: Instant,
      arrives: Instant,
      rows: z.array(
        Bin.extend({
          binId: Id,
          /** What should stand there over the gap, at the place's own aim (an estimate). */
          needed: z.number().int(),
          suggested: z.object({ packs: z.number().int(), packSize: z.number().int(), units: z.number().int() }),
          /** The shelf cannot take all of it. */
          shelfTooSmall: z.boolean(),
          inDraft: z.object({ orderId: Id, number: z.string() }).nullable(),
        }),
      ),
    }),
  ),
})
export type GapAhead = z.infer<typeof GapAhead>
export const readGapAhead = contract({
  method: 'GET',
  path: '/worklist/gap',
  summary: 'From ten days before a holiday gap: what would not last, and by which order to bring it',
  allow: coordinator,
  query: z.object({ supplierId: Id.optional() }),
  answer: z.object({ items: z.array(GapAhead) }),
})

export const orderStates = [
  'draft',
  'sent',
  'acknowledged',
  'part-received',
  'closed',
  'cancelled',
  'recorded-elsewhere',
] as const
export type OrderState = (typeof orderStates)[number]

export const OrderLine = z.object({
  id: Id,
  binId: Id,
  itemId: Id,
  itemName: z.string(),
  roomId: Id,
  roomName: z.string(),
  binDisplay: z.string(),
  packs: z.number().int(),
  packSize: z.number().int(),
  orderUnit: z.string(),
  units: z.number().int(),
  arrivedUnits: z.number().int(),
  receivedUnits: z.number().int(),
  cancelledUnits: z.number().int(),
  /** Of one unit of use; times `units` it is what the item costs in this order. */
  price: z.number().nullable(),
})
export const Order = z.object({
  id: Id,
  number: z.string(),
  supplierId: Id,
  supplierName: z.string(),
  supplierKind: z.enum(['stores', 'outside']),
  state: z.enum(orderStates),
  outsideReference: z.string().nullable(),
  createdAt: Instant,
  sentAt: Instant.nullable(),
  expectedOn: DateOnly.nullable(),
  version: z.number().int(),
  lines: z.array(OrderLine),
})
export type Order = z.infer<typeof Order>

const line = z.strictObject({
  binId: Id,
  packs: z.number().int('whole packs only').min(1, 'at least 1 pack').max(9_999),
})
const lines = z.array(line).min(1, 'an order needs at least one item').max(500)

export const createOrder = contract({
  method: 'POST',
  path: '/orders',
  summary: 'Start a draft order',
  allow: coordinator,
  body: z.strictObject({ supplierId: Id, lines }),
  answer: Order,
  status: 201,
})
export const updateOrder = contract({
  method: 'PATCH',
  path: '/orders/:id',
  summary: 'Change a draft, or the expected day of an order on its way',
  allow: coordinator,
  params: idParams,
  body: z.strictObject({ lines, expectedOn: DateOnly, version: z.number().int() }).partial(),
  answer: Order,
})
export const readOrder = contract({
  method: 'GET',
  path: '/orders/:id',
  summary: 'One order',
  allow: coordinator,
  params: idParams,
  answer: Order,
})
export const listOrders = contract({
  method: 'GET',
  path: '/orders',
  summary: 'Orders, newest first',
  allow: coordinator,
  query: z.object({
    ...pageQuery,
    state: z.enum(orderStates).optional(),
    open: z.enum(['yes', 'no']).optional(),
    supplierId: Id.optional(),
  }),
  answer: listOf(Order),
})
export const sendOrder = contract({
  method: 'POST',
  path: '/orders/:id/send',
  summary: 'Send a draft: numbered once, cannot change afterwards',
  allow: coordinator,
  params: idParams,
  answer: Order,
})
export const acknowledgeOrder = contract({
  method: 'POST',
  path: '/orders/:id/acknowledge',
  summary: 'The supplier confirmed it',
  allow: coordinator,
  params: idParams,
  body: z.strictObject({ expectedOn: DateOnly }).partial().optional(),
  answer: Order,
})
export const cancelOrder = contract({
  method: 'POST',
  path: '/orders/:id/cancel',
  summary: 'Cancel what has not been put away',
  allow: coordinator,
  params: idParams,
  body: z
    .strictObject({ reason: z.string().trim().max(300) })
    .partial()
    .optional(),
  answer: Order,
})

const Cutoff = z.object({
  supplierId: Id,
  supplierName: z.string(),
  orderBy: Instant,
  arrives: Instant,
  toOrder: z.number().int(),
})

/** What a role needs to see first. Only the part of the caller's role is filled. */
export const Today = z.object({
  coordinator: z
    .object({
      cutOffs: z.array(Cutoff),
      toOrder: z.number().int(),
      mayRunOut: z.array(
        z.object({ bin: Bin, outBy: DateOnly.nullable(), nextArrival: Instant.nullable(), risk: z.number() }),
      ),
      countFirst: z.array(Bin),
      lateOrders: z.array(
        z.object({
          id: Id,
          number: z.string(),
          supplierName: z.string(),
          expectedOn: DateOnly,
          workingDaysLate: z.number().int(),
        }),
      ),
      /** Holiday gaps that are near; `places` would not last and stand in no draft yet. */
      gaps: z.array(
        z.object({
          supplierId: Id,
          supplierName: z.string(),
          name: z.string(),
          from: DateOnly,
          lastOrderBy: Instant,
          places: z.number().int(),
        }),
      ),
      /** Calendars somebody goes by that say nothing about a year that is near. */
      calendars: z.array(z.object({ id: Id, name: z.string(), emptyYear: z.number().int() })),
      /** Places with unusual stretches of use that wait for a word. */
      asked: z.number().int(),
    })
    .optional(),
  reviewer: z
    .object({
      due: z.number().int(),
      thisWeek: z.number().int(),
      proposed: z.number().int(),
      moved: z.array(
        z.object({ bin: Bin, from: z.number().int().nullable(), to: z.number().int(), at: Instant, cause: z.string() }),
      ),
    })
    .optional(),
  administrator: z
    .object({ problems: z.array(z.object({ what: z.string(), action: z.string(), to: z.string().nullable() })) })
    .optional(),
})
export type Today = z.infer<typeof Today>
export const readToday = contract({
  method: 'GET',
  path: '/today',
  summary: 'What needs a look today, by role',
  allow: 'signed-in',
  answer: Today,
})
