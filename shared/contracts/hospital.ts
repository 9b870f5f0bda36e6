import { z } from 'zod'
import { contract, Id, text } from './contract.ts'

export const Hospital = z.object({
  name: z.string(),
  timeZone: z.string(),
  /** The hospital's own noun for a bin. */
  binWord: z.enum(['bin', 'place', 'shelf place']),
  currency: z.string(),
  levels: z.object({ V: z.number(), E: z.number(), D: z.number() }),
  floor: z.number(),
  ceiling: z.number(),
  /** A second person confirms a service level. */
  twoPersons: z.boolean(),
  vitalPolicyText: z.string(),
  vitalPolicyLink: z.string(),
  resupplyPhone: z.string(),
  orderingCost: z.number(),
  holdingRatePerYear: z.number(),
  /** Closed days wherever no other calendar is named. */
  calendarId: Id.nullable(),
  /** Places with few counts learn from like wards. */
  pooling: z.boolean(),
  demo: z.boolean(),
})
export type Hospital = z.infer<typeof Hospital>
const level = z.number().min(0.5).max(0.9999)

export const readHospital = contract({
  method: 'GET',
  path: '/hospital',
  summary: 'Hospital settings',
  allow: 'signed-in',
  answer: Hospital,
})
export const updateHospital = contract({
  method: 'PATCH',
  path: '/hospital',
  summary: 'Change hospital settings',
  allow: ['administrator'],
  body: z
    .strictObject({
      name: text(120),
      timeZone: text(60),
      binWord: Hospital.shape.binWord,
      currency: z.string().regex(/^[A-Z]{3}$/, 'three capital letters, as GBP'),
      levels: z.strictObject({ V: level, E: level, D: level }),
      floor: level,
      ceiling: level,
      twoPersons: z.boolean(),
      vitalPolicyText: z.string().trim().max(600),
      vitalPolicyLink: z.string().trim().max(300),
      resupplyPhone: z.string().trim().max(60),
      orderingCost: z.number().min(0).max(10_000),
      holdingRatePerYear: z.number().min(0).max(2),
      calendarId: Id.nullable(),
      pooling: z.boolean(),
    })
    .partial(),
  answer: Hospital,
})
