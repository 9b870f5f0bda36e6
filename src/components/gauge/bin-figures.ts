import type { Bin } from '#shared/contracts/bins.ts'
import type { GaugeFigures } from './gauge-geometry.ts'

/** What the gauge draws of a bin. `waiting`: its newest count is on this phone and not yet in the record. */
export function binFigures(bin: Bin, more: { waiting?: boolean } = {}): GaugeFigures {
  const never = bin.states.includes('never-counted') || bin.lastCount === null
  return {
    onHand: never ? null : bin.onHand,
    onOrder: bin.onOrder,
    reorderPoint: bin.reorderPoint,
    parLevel: bin.parLevel,
    held: bin.held,
    packSize: bin.packSize,
    old: bin.states.includes('count-overdue'),
    countFirst: bin.states.includes('count-first'),
    waiting: more.waiting ?? false,
    holiday: bin.gap?.level ?? null,
    closed: bin.closed !== null,
  }
}
