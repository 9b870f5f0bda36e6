import type { DemandInterval } from '#shared/demand/demand-events.ts'

const dayMs = 86_400_000

/** A chain of intervals with these uses, weekly unless told otherwise; changes are laid over single ones. */
export const weeks = (
  uses: readonly number[],
  changes: Record<number, Partial<DemandInterval>> = {},
  days = 7,
): DemandInterval[] =>
  uses.map((quantity, i) => ({
    openingOpId: `c${i}`,
    closingOpId: `c${i + 1}`,
    openedAt: i * days * dayMs,
    closedAt: (i + 1) * days * dayMs,
    days,
    stockedFrom: i * days * dayMs,
    exposureDays: days,
    quantity,
    extraUnits: 0,
    censored: false,
    weight: 1,
    used: true,
    why: null,
    wastage: 0,
    ...changes[i],
  }))
