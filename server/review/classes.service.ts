import type { Ved } from '#shared/contracts/catalogue.ts'
import type { Reader, Tx } from '../db/client.ts'
import { listClassLevels, upsertClassLevel } from './classes.repository.ts'

/** Where a hospital starts: its own choice from then on. No standard sets these numbers (common practice). */
export const startingLevels: Record<Ved, number> = { V: 0.995, E: 0.98, D: 0.95 }

export async function classLevels(db: Reader): Promise<Record<Ved, number>> {
  const rows = await listClassLevels(db)
  return { ...startingLevels, ...Object.fromEntries(rows.map((r) => [r.ved, r.level])) }
}

export async function setClassLevels(tx: Tx, levels: Partial<Record<Ved, number>>): Promise<void> {
  for (const [ved, level] of Object.entries(levels)) await upsertClassLevel(tx, ved as Ved, level)
}
