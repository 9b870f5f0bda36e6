import { z } from 'zod'
import { contract, DateOnly, Id, idParams, listOf, text } from './contract.ts'

const editors = ['coordinator', 'administrator'] as const
/** So many days a calendar holds. */
export const mostDays = 2_000

export const CalendarDay = z.strictObject({ date: DateOnly, name: z.string().trim().max(120) })
export type CalendarDay = z.infer<typeof CalendarDay>

/** Days on which something is shut: a supplier, the stores, a ward. */
export const Calendar = z.object({
  id: Id,
  name: z.string(),
  /** By date. */
  days: z.array(CalendarDay),
  /** Holds wherever no other calendar is named. */
  isHospital: z.boolean(),
  suppliers: z.number().int(),
  wards: z.number().int(),
  /** The next year without a single day in it, once that year is near; null when all is well. */
  emptyYear: z.number().int().nullable(),
  retired: z.boolean(),
})
export type Calendar = z.infer<typeof Calendar>

export const listCalendars = contract({
  method: 'GET',
  path: '/calendars',
  summary: 'Calendars of closed days',
  allow: editors,
  query: z.object({ retired: z.enum(['yes', 'no']).default('no') }),
  answer: listOf(Calendar),
})
export const readCalendar = contract({
  method: 'GET',
  path: '/calendars/:id',
  summary: 'One calendar with its days',
  allow: editors,
  params: idParams,
  answer: Calendar,
})
export const createCalendar = contract({
  method: 'POST',
  path: '/calendars',
  summary: 'Add a calendar',
  allow: editors,
  body: z.strictObject({ name: text(120) }),
  answer: Calendar,
  status: 201,
})
export const updateCalendar = contract({
  method: 'PATCH',
  path: '/calendars/:id',
  summary: 'Rename or retire a calendar, or give it other days',
  allow: editors,
  params: idParams,
  body: z.strictObject({ name: text(120), days: z.array(CalendarDay).max(mostDays), retired: z.boolean() }).partial(),
  answer: Calendar,
  largest: 300_000,
})

/** What an iCalendar file brought. */
export const CalendarImport = z.object({
  calendar: Calendar,
  added: z.number().int(),
  /** Days that stood there already. */
  known: z.number().int(),
  /** Entries that are not whole days, or that have no date; each with what to do. */
  left: z.array(z.object({ name: z.string(), why: z.string() })),
})
export type CalendarImport = z.infer<typeof CalendarImport>
export const importCalendar = contract({
  method: 'POST',
  path: '/calendars/:id/import',
  summary: 'Add the whole-day events of an iCalendar file (RFC 5545)',
  allow: editors,
  params: idParams,
  body: z.strictObject({ text: z.string().min(1, 'the file is empty').max(1_000_000, 'at most 1 MB') }),
  answer: CalendarImport,
  largest: 1_100_000,
})
