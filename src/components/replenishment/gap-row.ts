import type { Bin } from '#shared/contracts/bins.ts'
import type { GapAhead } from '#shared/contracts/replenishment.ts'

export type GapSlot = GapAhead['slots'][number]
export type GapRow = GapSlot['rows'][number]

/** A row on the line of what should stand there before the holiday, in place of its reorder point. */
export function onHolidayLine(row: GapRow): Bin {
  const under = Math.max(0, row.needed - row.position)
  return { ...row, reorderPoint: row.needed, parLevel: null, under, gap: null }
}

/** What the draft would be given: rows that no draft holds yet. */
export const openRows = (rows: readonly GapRow[]): GapRow[] => rows.filter((row) => row.inDraft === null)
