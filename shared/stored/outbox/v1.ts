import { z } from 'zod'

/**
 * `sending` is only a hint for the display: at start every such row is `queued` again. `acked` keeps the receipt.
 * `attention`: a person decides. `discarded`: a person decided to drop it; the row stays for 30 days.
 */
export const OutboxState = z.enum(['queued', 'sending', 'acked', 'attention', 'discarded'])

/** The server's last word on one entry. */
export const OutboxReply = z.object({
  status: z.string(),
  code: z.string().nullable(),
  message: z.string().nullable(),
  fixable: z.boolean(),
  flags: z.array(z.string()),
  /** Milliseconds since 1970, phone time. */
  at: z.number(),
})

/** What the lists show of an entry without any other data. */
export const OutboxLabel = z.object({
  roomId: z.string(),
  binId: z.string().nullable(),
  binDisplay: z.string(),
  itemName: z.string(),
  unit: z.string(),
})

/** One entry made on this device. `op` is what is sent, byte for byte, and never changes. */
export const OutboxEntry = z.object({
  schema: z.literal(1),
  opId: z.string(),
  /** Whose entry it is; no one else can open, change or send it. */
  userId: z.string(),
  /** Shown to the next person at this phone. */
  initials: z.string(),
  localSeq: z.number().int(),
  state: OutboxState,
  op: z.record(z.string(), z.unknown()),
  label: OutboxLabel,
  /** Milliseconds since 1970, phone time. */
  savedAt: z.number(),
  closedAt: z.number().nullable(),
  /** Batches that ended in a server fault with this entry in them. */
  faults: z.number().int(),
  /** Largest batch this entry may travel in; halves when a batch fails. */
  batchLimit: z.number().int(),
  reply: OutboxReply.nullable(),
  replacedBy: z.string().nullable(),
  discardReason: z.string().nullable(),
})
