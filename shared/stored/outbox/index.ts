import type { z } from 'zod'
import type { OutboxReply as Reply } from './v1.ts'
import { OutboxEntry as Current, type OutboxLabel as Label, type OutboxState as State } from './v1.ts'

export const OutboxEntry = Current
export type OutboxEntry = z.infer<typeof Current>
export type OutboxReply = z.infer<typeof Reply>
export type OutboxLabel = z.infer<typeof Label>
export type OutboxState = z.infer<typeof State>

/**
 * An entry of any version as the present one. The payload inside is never touched: the server reads every version.
 *
 * @returns null when it is not an entry we ever wrote; the caller keeps the row as it is
 */
export function up(stored: unknown): OutboxEntry | null {
  const parsed = Current.safeParse(stored)
  return parsed.success ? parsed.data : null
}
