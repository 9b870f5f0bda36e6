import type { z } from 'zod'
import { RoundDraft as Current, type RoundMark as Mark } from './v1.ts'

export const RoundDraft = Current
export type RoundDraft = z.infer<typeof Current>
export type RoundMark = z.infer<typeof Mark>

/**
 * A round of any version as the present one.
 * @returns null when it is not one we ever wrote
 */
export function up(stored: unknown): RoundDraft | null {
  const parsed = Current.safeParse(stored)
  return parsed.success ? parsed.data : null
}
