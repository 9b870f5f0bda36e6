import { PolicyInputError } from './policy-input-error.ts'
import type { PolicyInput } from './policy-input.ts'
import { reorderPoint } from './reorder-point.ts'

/** The groups of inputs a reorder point moves by, in the order in which they are exchanged. */
export const CAUSES_OF_CHANGE = ['use', 'rhythm', 'delivery', 'planned-change', 'like-wards', 'aim', 'limits'] as const
export type CauseOfChange = (typeof CAUSES_OF_CHANGE)[number]

/** What a group of inputs brought. Units of use, signed. */
export interface CausePart {
  what: CauseOfChange
  units: number
}

/**
 * How much of the move of a reorder point each group of inputs brought.
 *
 * The groups are exchanged one after the other, before for after, always in the order of `CAUSES_OF_CHANGE`; a part is
 * the move of the reorder point at that exchange. Effects that only two groups have together fall to the later one.
 * use: intervals or known demand, and wastage; rhythm: the review period; delivery: the lead time; planned-change:
 * days of exposure per day to cover; like-wards: the prior; aim: service level and measure, method and estimate;
 * limits: capacity, floor, packs and costs, shelf life. A mixed input that cannot be computed hands its move on to the
 * next group. Parts of 0 are left out; the units add up to the whole move.
 *
 * @returns empty where one of the two has no reorder point
 * @throws {PolicyInputError} when `before` or `after` cannot be read
 */
export function splitCauses(before: PolicyInput, after: PolicyInput): CausePart[] {
  const start = reorderPoint(before).reorderPoint
  const end = reorderPoint(after).reorderPoint
  if (start === null || end === null) return []
  const changed = CAUSES_OF_CHANGE.filter((what) => differs(what, before, after))
  const parts: CausePart[] = []
  let level = start
  let mixed = before
  changed.forEach((what, i) => {
    const last = i === changed.length - 1
    mixed = exchanged(what, mixed, after)
    const next = last ? end : levelOf(mixed)
    if (next === null || next === level) return
    parts.push({ what, units: next - level })
    level = next
  })
  return parts
}

/** Which fields belong to a group; the exposure to cover is looked at per day, since days belong to others. */
const fields: Record<Exclude<CauseOfChange, 'planned-change'>, readonly (keyof PolicyInput)[]> = {
  use: ['intervals', 'demand', 'wastagePerDay'],
  rhythm: ['reviewPeriodDays'],
  delivery: ['leadTime'],
  'like-wards': ['prior'],
  aim: ['serviceLevel', 'serviceMeasure', 'method', 'estimate'],
  limits: ['order', 'capacity', 'shelfLifeDays', 'pinnedFloor'],
}

const daysToCover = (input: PolicyInput): number => input.leadTime.meanDays + (input.reviewPeriodDays ?? 0)

/** Days of exposure per day to cover: 1 where nothing is planned. */
function activity(input: PolicyInput): number {
  const days = daysToCover(input)
  return input.protectionExposureDays == null || days === 0 ? 1 : input.protectionExposureDays / days
}

function differs(what: CauseOfChange, before: PolicyInput, after: PolicyInput): boolean {
  if (what === 'planned-change') return Math.abs(activity(before) - activity(after)) > 1e-9
  return fields[what].some((field) => JSON.stringify(before[field] ?? null) !== JSON.stringify(after[field] ?? null))
}

function exchanged(what: CauseOfChange, mixed: PolicyInput, after: PolicyInput): PolicyInput {
  if (what === 'planned-change') return withActivity(mixed, activity(after))
  const taken = Object.fromEntries(fields[what].map((field) => [field, after[field]]))
  return withActivity({ ...mixed, ...taken }, activity(mixed))
}

const withActivity = (input: PolicyInput, perDay: number): PolicyInput => ({
  ...input,
  protectionExposureDays: perDay === 1 ? null : perDay * daysToCover(input),
})

function levelOf(input: PolicyInput): number | null {
  try {
    return reorderPoint(input).reorderPoint
  } catch (error) {
    if (error instanceof PolicyInputError) return null
    throw error
  }
}
