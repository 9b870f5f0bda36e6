import type { Ved } from '#shared/contracts/catalogue.ts'
import type { Reader } from '../db/client.ts'
import { classLevels } from './classes.service.ts'
import { listFloors, listOverrides, type OverrideRow } from './review.repository.ts'

/** How sure one bin has to be, and who said so. */
export interface Aim {
  target: number
  source: 'bin-override' | 'item-override' | 'class' | 'hospital'
  reviewBy: string | null
  reason: string | null
  policyReference: string | null
  floor: number | null
}

interface Subject {
  binId: number
  itemId: number
  ved: Ved
}

/**
 * The aim of each bin: its own override, else its item's, else its class.
 * An override past its date stays until a person decides: it never reverts silently.
 */
export async function aimsOf(db: Reader, subjects: Subject[]): Promise<Map<number, Aim>> {
  const binIds = subjects.map((s) => s.binId)
  const overrides = await listOverrides(db, binIds, [...new Set(subjects.map((s) => s.itemId))], ['in-force'])
  const floors = await listFloors(db, binIds)
  const levels = await classLevels(db)
  return new Map(
    subjects.map((s) => {
      const own = overrides.find((o) => o.binId === s.binId)
      const shared = overrides.find((o) => o.itemId === s.itemId && o.binId === null)
      const floor = floors.find((f) => f.binId === s.binId)?.floor ?? null
      return [s.binId, { ...aimOf(own, shared, levels[s.ved]), floor }]
    }),
  )
}

function aimOf(own: OverrideRow | undefined, shared: OverrideRow | undefined, classLevel: number): Omit<Aim, 'floor'> {
  const chosen = own ?? shared
  if (!chosen) return { target: classLevel, source: 'class', reviewBy: null, reason: null, policyReference: null }
  return {
    target: chosen.level,
    source: own ? 'bin-override' : 'item-override',
    reviewBy: chosen.reviewBy,
    reason: chosen.reason,
    policyReference: chosen.policyReference,
  }
}
