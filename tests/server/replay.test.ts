import fc from 'fast-check'
import { asc } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { auditLog } from '#server/audit/audit.tables.ts'
import { levelDifference } from '#server/counts/levels.service.ts'
import { binLevels, movements, operations } from '#server/counts/counts.tables.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import { startTestApp, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, operation, sync, type SyncReply } from '../support/factories.ts'

let app: TestApp
let bins: Bin[]

beforeAll(async () => {
  app = await startTestApp()
  const room = await makeRoom(app)
  const item = await makeItem(app)
  bins = []
  for (let i = 0; i < 4; i += 1) bins.push(await makeBin(app, { roomId: room.id, itemId: item.id }))
})
afterAll(() => app.close())

/** Everything that was recorded and everything computed from it. */
async function state() {
  const { db } = app.database
  return {
    operations: await db.select().from(operations).orderBy(asc(operations.id)),
    movements: await db.select().from(movements).orderBy(asc(movements.id)),
    audit: (await db.select().from(auditLog)).length,
    levels: await db.select().from(binLevels).orderBy(asc(binLevels.binId)),
  }
}

const drawn = fc.array(
  fc.record({
    type: fc.constantFrom('count', 'receipt', 'take', 'wastage', 'hold', 'flag', 'signal', 'transfer'),
    bin: fc.nat({ max: 3 }),
    other: fc.nat({ max: 3 }),
    quantity: fc.integer({ min: 0, max: 40 }),
    minutesAgo: fc.integer({ min: 0, max: 600 }),
  }),
  { minLength: 3, maxLength: 12 },
)

function entryOf(d: {
  type: string
  bin: number
  other: number
  quantity: number
  minutesAgo: number
}): Record<string, unknown> {
  const deviceTime = new Date(app.clock.now().getTime() - d.minutesAgo * 60_000).toISOString()
  const base = { type: d.type, binId: bins[d.bin]!.id, deviceTime }
  if (d.type === 'signal') return operation(app, base)
  if (d.type === 'flag') return operation(app, { ...base, reason: 'label missing' })
  if (d.type === 'transfer') {
    const other = d.other === d.bin ? (d.bin + 1) % 4 : d.other
    return operation(app, { ...base, quantity: d.quantity, direction: 'out', toBinId: bins[other]!.id })
  }
  const reason = d.type === 'wastage' || d.type === 'hold' ? { reason: 'wet' } : {}
  return operation(app, { ...base, quantity: d.quantity, ...reason })
}

describe('any batch', () => {
  it('changes nothing when it comes again, in any order, whole or in parts', async () => {
    const nurse = await app.as('nurse')
    const send = async (items: Record<string, unknown>[]): Promise<string[]> =>
      ((await sync(app, nurse, items)).body as SyncReply).results.map((r) => r.status)
    await fc.assert(
      fc.asyncProperty(drawn, fc.infiniteStream(fc.nat()), async (entries, numbers) => {
        const batch = entries.map(entryOf)
        const first = await send(batch)
        expect(first.every((s) => s.startsWith('accepted'))).toBe(true)
        const before = await state()
        const shuffled = batch.map((entry) => [numbers.next().value!, entry] as const).sort((a, b) => a[0] - b[0])
        const again = await send(shuffled.map(([, entry]) => entry))
        const parts = await Promise.all([send(batch.slice(1)), send(batch.slice(0, 2))])
        expect([...again, ...parts.flat()].every((s) => s === 'duplicate')).toBe(true)
        expect(await state()).toEqual(before)
        for (const bin of bins) expect(await levelDifference(app.database.db, Number(bin.id))).toBeNull()
      }),
      { numRuns: 25, endOnFailure: true },
    )
  })

  it('moves the levels of the places it names and of no other', async () => {
    const nurse = await app.as('nurse')
    const untouched = bins[3]!
    const before = (await state()).levels.find((l) => l.binId === Number(untouched.id))
    const entries = Array.from({ length: 9 }, (_, i) =>
      entryOf({ type: 'count', bin: i % 3, other: 0, quantity: i, minutesAgo: i }),
    )
    await sync(app, nurse, entries)
    const after = (await state()).levels.find((l) => l.binId === Number(untouched.id))
    expect(after).toEqual(before)
  })
})
