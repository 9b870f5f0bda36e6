import { z } from 'zod'
import { contract, DateOnly, Id, idParams, Instant, listOf, pageQuery, text } from './contract.ts'

const planners = ['coordinator', 'reviewer', 'administrator'] as const

export const PlannedChangeKind = z.enum(['factor', 'cases', 'closed'])
export type PlannedChangeKind = z.infer<typeof PlannedChangeKind>
const factor = z.number().min(0.05, 'at least 0.05; a place that is shut is closed').max(20, 'at most 20')
const weekdays = z.string().regex(/^(?!.*(.).*\1)[1-7]{0,7}$/, 'digits 1 (Monday) to 7, each once; empty is every day')
const amount = z.number().min(0, '0 or more').max(10_000, 'at most 10,000')

const fields = {
  name: text(120),
  /** Where: a ward or a room of it; both null is the whole hospital. */
  wardId: Id.nullable(),
  roomId: Id.nullable(),
  /** Which items; none is every item there. */
  itemIds: z.array(Id).max(200, 'at most 200 items'),
  /** `factor`: use times so much. `cases`: so many units for each case, so many cases a day. `closed`: no use. */
  kind: PlannedChangeKind,
  factor: factor.nullable(),
  unitsPerCase: amount.nullable(),
  casesPerDay: amount.nullable(),
  /** Days on which the cases fall. */
  weekdays,
  startsOn: DateOnly,
  /** Last day; null is until further notice. */
  endsOn: DateOnly.nullable(),
  reason: text(300),
}

export const PlannedChange = z.object({
  ...fields,
  name: z.string(),
  factor: z.number().nullable(),
  unitsPerCase: z.number().nullable(),
  casesPerDay: z.number().nullable(),
  weekdays: z.string(),
  reason: z.string(),
  id: Id,
  placeName: z.string(),
  itemNames: z.array(z.string()),
  bins: z.number().int(),
  state: z.enum(['ahead', 'now', 'past', 'taken-back']),
  /** What the counts say of it so far; null before there are any, or where nothing can be seen. */
  seen: z.object({ factor: z.number().nullable(), intervals: z.number().int(), used: z.number() }).nullable(),
  byName: z.string(),
  createdAt: Instant,
})
export type PlannedChange = z.infer<typeof PlannedChange>

export const listPlannedChanges = contract({
  method: 'GET',
  path: '/planned-changes',
  summary: 'Planned changes of use: ahead and now first',
  allow: planners,
  query: z.object({ ...pageQuery, show: z.enum(['open', 'all']).default('open') }),
  answer: listOf(PlannedChange),
})
export const createPlannedChange = contract({
  method: 'POST',
  path: '/planned-changes',
  summary: 'Plan a change of use, or a closure',
  allow: planners,
  body: z.strictObject({
    ...fields,
    wardId: fields.wardId.default(null),
    roomId: fields.roomId.default(null),
    itemIds: fields.itemIds.default([]),
    factor: fields.factor.default(null),
    unitsPerCase: fields.unitsPerCase.default(null),
    casesPerDay: fields.casesPerDay.default(null),
    weekdays: weekdays.default(''),
    endsOn: fields.endsOn.default(null),
  }),
  answer: PlannedChange,
  status: 201,
})
export const updatePlannedChange = contract({
  method: 'PATCH',
  path: '/planned-changes/:id',
  summary: 'Change a planned change; its place and items stay',
  allow: planners,
  params: idParams,
  body: z
    .strictObject({
      name: fields.name,
      factor: fields.factor,
      unitsPerCase: fields.unitsPerCase,
      casesPerDay: fields.casesPerDay,
      weekdays,
      startsOn: fields.startsOn,
      endsOn: fields.endsOn,
      reason: fields.reason,
    })
    .partial(),
  answer: PlannedChange,
})
export const takeBackPlannedChange = contract({
  method: 'POST',
  path: '/planned-changes/:id/take-back',
  summary: 'It will not happen, or did not: it counts for nothing from now on and stays on record',
  allow: planners,
  params: idParams,
  body: z.strictObject({ reason: text(300) }),
  answer: PlannedChange,
})
/** What the same days brought a year ago. */
export const LastYear = z.object({
  /** Use then over use in the eight weeks before; null where there are too few counts. */
  factor: z.number().nullable(),
  intervals: z.number().int(),
  from: DateOnly,
  to: DateOnly,
})
export type LastYear = z.infer<typeof LastYear>
export const readLastYear = contract({
  method: 'GET',
  path: '/planned-changes/last-year',
  summary: 'The factor of the same days last year, from counts',
  allow: planners,
  query: z.object({
    wardId: Id.optional(),
    roomId: Id.optional(),
    itemId: Id.optional(),
    startsOn: DateOnly,
    endsOn: DateOnly,
  }),
  answer: LastYear,
})
