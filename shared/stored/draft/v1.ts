import { z } from 'zod'

/** What one place of a round has come to. */
export const RoundMark = z.object({
  opId: z.string(),
  quantity: z.number().int(),
  /** A number entered earlier by the put-away question, taken back together with the count. */
  receiptOpId: z.string().nullable(),
  /** Milliseconds since 1970. */
  at: z.number(),
})

/** A counting round that survives being dropped: the walk, the place, what was typed and not yet saved. */
export const RoundDraft = z.object({
  schema: z.literal(1),
  userId: z.string(),
  roomId: z.string(),
  /** The walk, fixed at its start: bin ids in walking order. */
  walk: z.array(z.string()),
  /** Why these: the places due, or every place of the room. */
  scope: z.enum(['due', 'all']),
  /** The place in hand; null when the round is through. */
  at: z.string().nullable(),
  done: z.record(z.string(), RoundMark),
  skipped: z.array(z.string()),
  /** Places the record knew to be below their reorder point when the round began. */
  knownBelow: z.array(z.string()),
  /** Digits typed and not saved, with the time of the last one. */
  digits: z.record(z.string(), z.object({ text: z.string(), at: z.number() })),
  startedAt: z.number(),
  touchedAt: z.number(),
  /** Milliseconds spent in the round, breaks of over two minutes left out. */
  activeMs: z.number(),
})
