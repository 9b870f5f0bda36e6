import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import { uuidv7 } from 'uuidv7'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { Operation } from '#shared/contracts/counts.ts'
import { forgetDevice, rememberClock } from '#src/services/device.ts'
import { closeDb, withDb } from '#src/services/offline-db.ts'
import {
  changeEntries,
  discardEntry,
  entriesOf,
  onOutboxChange,
  pruneReceipts,
  queuedOf,
  replaceEntry,
  requeueSending,
  resendEntry,
  saveEntries,
  waitingOfOthers,
  type NewEntry,
} from '#src/services/outbox.ts'
import { learn } from '#src/services/time.ts'

const T0 = Date.UTC(2026, 11, 1, 9)
const countOf = (quantity: number, userId = '4', opId = uuidv7()): NewEntry => ({
  userId,
  initials: 'M.O.',
  op: { opId, type: 'count', binId: '9', itemId: '3', quantity },
  label: { roomId: '1', binId: '9', binDisplay: 'U7K2-M4Q9', itemName: 'Gauze swab', unit: 'each' },
})

beforeEach(async () => {
  await closeDb()
  forgetDevice()
  globalThis.indexedDB = new IDBFactory()
})

describe('outbox', () => {
  it('keeps one record per operation, numbered, timed and as the contract wants it', async () => {
    await rememberClock(learn(T0 + 60_000, T0 - 200, T0))
    const [first, second] = await saveEntries([countOf(12), countOf(7)], T0 + 1_000)
    expect(first?.localSeq).toBe(1)
    expect(second?.localSeq).toBe(2)
    expect(Operation.safeParse(first?.op).success).toBe(true)
    expect(first?.op).toMatchObject({ estTime: new Date(T0 + 61_100).toISOString(), clockOffsetMs: 60_100, v: 1 })
    expect((await queuedOf('4')).map((e) => e.op.quantity)).toEqual([12, 7])
  })

  it('saves the same operation once, however often it is tried', async () => {
    const entry = countOf(12)
    await saveEntries([entry], T0)
    await saveEntries([entry], T0 + 5)
    expect(await queuedOf('4')).toHaveLength(1)
  })

  it('saves all or none', async () => {
    const broken = countOf(3)
    Object.defineProperty(broken.op, 'quantity', {
      enumerable: true,
      get: () => {
        throw new Error('no number')
      },
    })
    await expect(saveEntries([countOf(1), broken], T0)).rejects.toThrow('no number')
    expect(await queuedOf('4')).toEqual([])
  })

  it('asks for strict durability and says so only after the transaction is complete', async () => {
    let durability: string | undefined
    await withDb(async (db) => {
      const real = db.transaction.bind(db)
      vi.spyOn(db, 'transaction').mockImplementation(((...args: Parameters<typeof real>) => {
        durability = args[2]?.durability
        return real(...args)
      }) as typeof db.transaction)
      return Promise.resolve()
    })
    await saveEntries([countOf(1)], T0)
    expect(durability).toBe('strict')
  })

  it('opens again when the connection died under it', async () => {
    await saveEntries([countOf(1)], T0)
    await withDb((db) => Promise.resolve(db.close()))
    await saveEntries([countOf(2)], T0)
    expect((await queuedOf('4')).map((e) => e.op.quantity)).toEqual([1, 2])
  })

  it('does not keep a failed open for ever', async () => {
    const spy = vi.spyOn(indexedDB, 'open').mockImplementation(() => {
      throw new DOMException('no space', 'QuotaExceededError')
    })
    await expect(saveEntries([countOf(1)], T0)).rejects.toThrow('no space')
    spy.mockRestore()
    await saveEntries([countOf(1)], T0)
    expect(await queuedOf('4')).toHaveLength(1)
  })

  it('queues what was being sent when the page went away', async () => {
    const [entry] = await saveEntries([countOf(1)], T0)
    await changeEntries(new Map([[entry?.opId ?? '', { state: 'sending' }]]))
    expect(await queuedOf('4')).toEqual([])
    await requeueSending()
    expect(await queuedOf('4')).toHaveLength(1)
  })

  it('never reopens what is closed', async () => {
    const [entry] = await saveEntries([countOf(1)], T0)
    const opId = entry?.opId ?? ''
    await changeEntries(new Map([[opId, { state: 'acked', closedAt: T0 }]]))
    await changeEntries(new Map([[opId, { state: 'queued' }]]))
    expect((await entriesOf('4'))[0]?.state).toBe('acked')
  })

  it('mends an entry with a new id and closes the old one in the same step', async () => {
    const [entry] = await saveEntries([countOf(1)], T0)
    const old = entry?.opId ?? ''
    await changeEntries(new Map([[old, { state: 'attention' }]]))
    const fixed = countOf(2)
    await replaceEntry(old, fixed, T0 + 10)
    const entries = await entriesOf('4')
    expect(entries.map((e) => [e.state, e.replacedBy])).toEqual([
      ['discarded', fixed.op.opId],
      ['queued', null],
    ])
    await changeEntries(new Map([[fixed.op.opId, { state: 'attention' }]]))
    await resendEntry(fixed.op.opId)
    expect(await queuedOf('4')).toHaveLength(1)
    await discardEntry(fixed.op.opId, 'counted again', T0 + 20)
    expect((await entriesOf('4')).at(-1)).toMatchObject({ state: 'discarded', discardReason: 'counted again' })
  })

  it('shows other people only as initials and a number', async () => {
    await saveEntries([countOf(1, '4'), countOf(2, '5'), countOf(3, '5')], T0)
    expect(await waitingOfOthers('4')).toEqual([{ initials: 'M.O.', count: 2 }])
    expect(await queuedOf('4')).toHaveLength(1)
  })

  it('drops receipts after 30 days and never anything unsent', async () => {
    const [sent, unsent] = await saveEntries([countOf(1), countOf(2)], T0)
    await changeEntries(new Map([[sent?.opId ?? '', { state: 'acked', closedAt: T0 }]]))
    expect(await pruneReceipts(T0 + 29 * 86_400_000)).toBe(0)
    expect(await pruneReceipts(T0 + 400 * 86_400_000)).toBe(1)
    expect((await entriesOf('4')).map((e) => e.opId)).toEqual([unsent?.opId])
  })

  it('tells its listeners', async () => {
    const heard = vi.fn()
    const stop = onOutboxChange(heard)
    await saveEntries([countOf(1)], T0)
    stop()
    await saveEntries([countOf(1)], T0)
    expect(heard).toHaveBeenCalledTimes(1)
  })
})
