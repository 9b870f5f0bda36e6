import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { Operation } from '#shared/contracts/counts.ts'
import { forgetDevice } from '#src/services/device.ts'
import { readDraft } from '#src/services/drafts.ts'
import { closeDb } from '#src/services/offline-db.ts'
import { entriesOf } from '#src/services/outbox.ts'
import { mergeSnapshot } from '#src/services/snapshot.ts'
import { useCountingStore } from '#src/stores/counting.ts'
import { useRoomsCacheStore } from '#src/stores/rooms-cache.ts'
import { useSessionStore } from '#src/stores/session.ts'
import { aBin, aSnapshot } from '#tests/support/count-factories.ts'

const day = 86_400_000
const ago = (days: number, quantity = 14) => ({
  quantity,
  effectiveAt: new Date(Date.now() - days * day).toISOString(),
})

/** A room with one place due of each kind, one that is not, and one without an item. */
const bins = () => [
  aBin('1', { lastCount: ago(2) }),
  aBin('2', { lastCount: ago(9), onHand: 40, position: 40, states: ['ok', 'count-overdue'] }),
  aBin('3', { lastCount: null, onHand: 0, states: ['never-counted'] }),
  aBin('4', { lastCount: ago(0.1), onHand: 40, position: 40, states: ['ok'] }),
  aBin('5', { itemId: null, item: null, lastCount: null, states: [] }),
]

/** A page as after a start of the browser: fresh stores, the same phone. */
function freshPage() {
  setActivePinia(createPinia())
  const session = useSessionStore()
  session.user = { id: '4', name: 'Mara Oduya', email: '', staffCode: '', role: 'nurse', roomIds: ['1'] }
  const rooms = useRoomsCacheStore()
  rooms.kept = { 1: mergeSnapshot(null, aSnapshot({ bins: bins() }), Date.now() - 1_000) }
  return useCountingStore()
}
const type = (store: ReturnType<typeof freshPage>, number: string) => [...number].forEach((digit) => store.press(digit))
const ops = async () => (await entriesOf('4')).map(({ op }) => [op.type, op.quantity ?? op.targetOpId])

beforeEach(async () => {
  await closeDb()
  forgetDevice()
  globalThis.indexedDB = new IDBFactory()
})
afterEach(() => vi.useRealTimers())

describe('a counting round', () => {
  it('walks the places that are due, in walking order', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    expect(store.round?.walk).toEqual(['1', '2', '3'])
    expect(store.known?.id).toBe('1')
  })

  it('walks the whole room when asked, or when nothing is due', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'all' })
    expect(store.round?.walk).toEqual(['1', '2', '3', '4'])
  })

  it('saves a count as the contract wants it, then stands at the next place', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    type(store, '12')
    expect(await store.submit()).toBe(true)
    const [entry] = await entriesOf('4')
    expect(Operation.safeParse(entry?.op).success).toBe(true)
    expect(entry?.op).toMatchObject({ type: 'count', binId: '1', itemId: '30', quantity: 12, basis: { lastShown: 14 } })
    expect(store.known?.id).toBe('2')
    expect(store.text).toBe('')
    expect(store.doneCount).toBe(1)
  })

  it('keeps the place and half typed digits across a restart of the browser', async () => {
    const before = freshPage()
    await before.open('1', { scope: 'due' })
    type(before, '12')
    await before.submit()
    type(before, '4')
    await before.leave()
    await closeDb()
    const after = freshPage()
    await after.open('1', { scope: 'due' })
    expect(after.known?.id).toBe('2')
    expect(after.text).toBe('4')
    expect(after.doneCount).toBe(1)
  })

  it('believes the outbox when the mark of a count was lost with the page', async () => {
    const before = freshPage()
    await before.open('1', { scope: 'due' })
    const draft = structuredClone(before.round)
    type(before, '12')
    await before.submit()
    await before.leave()
    const { writeDraft } = await import('#src/services/drafts.ts')
    await writeDraft(draft as NonNullable<typeof draft>)
    const after = freshPage()
    await after.open('1', { scope: 'due' })
    expect(after.known?.id).toBe('2')
  })

  it('takes back within ten seconds by a new entry and stands there again with the number', async () => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    type(store, '12')
    await store.submit()
    const counted = (await entriesOf('4'))[0]?.opId
    expect(await store.takeBack()).toBe(true)
    expect(await ops()).toEqual([
      ['count', 12],
      ['count.withdraw', counted],
    ])
    expect([store.known?.id, store.text, store.doneCount]).toEqual(['1', '12', 0])
    await store.submit()
    vi.advanceTimersByTime(10_001)
    expect(store.undo).toBeNull()
    expect(await store.takeBack()).toBe(false)
  })

  it('asks about a slip by ten and saves the number that was meant', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    type(store, '120')
    expect(await store.submit()).toBe(false)
    expect(store.question).toMatchObject({ kind: 'tenfold', keep: 120, instead: 12 })
    expect(await ops()).toEqual([])
    store.backToNumber()
    expect(store.text).toBe('120')
    await store.submit()
    await store.answer(12)
    expect((await entriesOf('4'))[0]?.op).toMatchObject({
      quantity: 12,
      basis: { question: 'tenfold', answer: 'changed' },
    })
  })

  it('puts the delivery away before the count when a rise is explained by it, and takes both back', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    type(store, '64')
    await store.submit()
    expect(store.question).toMatchObject({ kind: 'rise', rise: 50 })
    const asked = store.question as Extract<typeof store.question, { kind: 'rise' }>
    await store.answer(64, asked.lines)
    const [receipt, count] = await entriesOf('4')
    expect(receipt?.op).toMatchObject({ type: 'receipt', quantity: 50, orderLineId: '70' })
    expect(count?.op).toMatchObject({ type: 'count', quantity: 64, basis: { answer: 'put-away' } })
    await store.takeBack()
    expect((await ops()).slice(2)).toEqual([
      ['count.withdraw', count?.opId],
      ['movement.withdraw', receipt?.opId],
    ])
  })

  it('keeps the number on the screen when the phone cannot save', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    type(store, '12')
    await closeDb()
    vi.spyOn(indexedDB, 'open').mockImplementation(() => {
      throw new DOMException('full', 'QuotaExceededError')
    })
    expect(await store.submit()).toBe(false)
    expect(store.saveTrouble).toBeInstanceOf(DOMException)
    expect([store.known?.id, store.text]).toEqual(['1', '12'])
    vi.restoreAllMocks()
    expect(await store.submit()).toBe(true)
  })

  it('jumps to a scanned place, counts an unknown code by its code, and comes back', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    store.go('4')
    expect(store.known?.id).toBe('4')
    expect(store.total).toBe(4)
    store.goUnknown('UPKS85KK', 'UPKS-85KK')
    type(store, '3')
    await store.submit()
    expect((await entriesOf('4'))[0]?.op).toMatchObject({ binCode: 'UPKS85KK', quantity: 3 })
    expect(store.known?.id).toBe('4')
  })

  it('never moves the line during a round', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    expect(store.known?.reorderPoint).toBe(20)
    useRoomsCacheStore().kept = {
      1: mergeSnapshot(null, aSnapshot({ bins: bins().map((bin) => ({ ...bin, reorderPoint: 99 })) }), Date.now()),
    }
    expect(store.known?.reorderPoint).toBe(20)
  })

  it('says at the end how many were low without the record knowing, and forgets the walk', async () => {
    const store = freshPage()
    await store.open('1', { scope: 'due' })
    for (const number of ['12', '18', '30']) {
      type(store, number)
      if (!(await store.submit())) await store.answer(Number(number))
    }
    expect(store.finished).toBe(true)
    expect(store.summary).toMatchObject({ places: 3, found: 1 })
    await store.finish()
    expect(await readDraft('4', '1')).toBeNull()
  })
})
