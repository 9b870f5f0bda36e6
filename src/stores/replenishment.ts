import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import {
  acknowledgeOrder,
  cancelOrder,
  createOrder,
  listOrders,
  readOrder,
  readGapAhead,
  readWorklist,
  sendOrder,
  updateOrder,
  type GapAhead,
  type Order,
  type WorklistRow,
} from '#shared/contracts/replenishment.ts'
import { call } from '#src/services/api.ts'
import { everyPage } from '#src/services/every-page.ts'
import { useSessionStore } from './session.ts'

export interface WorklistFilter {
  roomId?: string
  supplierId?: string
}

/** What is to be ordered and what is on its way. Drafts live on the server from the first item, so none is lost. */
export const useReplenishmentStore = defineStore('replenishment', () => {
  const worklist = shallowRef<WorklistRow[] | null>(null)
  const orders = shallowRef<Order[] | null>(null)
  /** Holiday gaps ahead, one a supplier, with what would not last over them. */
  const gaps = shallowRef<GapAhead[] | null>(null)
  /** The draft that the pane shows. */
  const draftId = ref<string | null>(null)

  const drafts = computed(() => (orders.value ?? []).filter((order) => order.state === 'draft'))
  const draft = computed(() => drafts.value.find((order) => order.id === draftId.value) ?? drafts.value[0] ?? null)

  function put(order: Order): Order {
    const others = (orders.value ?? []).filter((o) => o.id !== order.id)
    const index = (orders.value ?? []).findIndex((o) => o.id === order.id)
    orders.value = index < 0 ? [order, ...others] : (orders.value ?? []).map((o) => (o.id === order.id ? order : o))
    return order
  }

  async function loadWorklist(filter: WorklistFilter = {}, signal?: AbortSignal): Promise<void> {
    worklist.value = await everyPage((page) =>
      call(readWorklist, { query: { ...filter, page, pageSize: 500 }, signal }),
    )
  }

  async function loadOrders(signal?: AbortSignal): Promise<void> {
    orders.value = await everyPage((page) => call(listOrders, { query: { page, pageSize: 200 }, signal }))
  }

  async function loadOrder(id: string, signal?: AbortSignal): Promise<Order> {
    return put(await call(readOrder, { params: { id }, signal }))
  }

  const linesOf = (order: Order): { binId: string; packs: number }[] =>
    order.lines.map((line) => ({ binId: line.binId, packs: line.packs }))

  async function loadGaps(signal?: AbortSignal): Promise<void> {
    const { items } = await call(readGapAhead, { query: {}, signal })
    gaps.value = items.filter((one) => one.gap !== null)
  }

  /** Puts packs of bins into the draft of their supplier; starts one where there is none. */
  async function addLines(supplierId: string, lines: readonly { binId: string; packs: number }[]): Promise<Order> {
    const open = drafts.value.find((order) => order.supplierId === supplierId)
    const ids = new Set(lines.map((line) => line.binId))
    const order = open
      ? await change(open, [...linesOf(open).filter((line) => !ids.has(line.binId)), ...lines])
      : put(await call(createOrder, { body: { supplierId, lines: [...lines] } }))
    draftId.value = order.id
    return order
  }

  async function add(row: WorklistRow, packs: number): Promise<Order> {
    if (!row.supplierId) throw new TypeError('an item without a supplier cannot be ordered')
    return addLines(row.supplierId, [{ binId: row.binId, packs }])
  }

  async function change(order: Order, lines: { binId: string; packs: number }[]): Promise<Order> {
    if (lines.length === 0) return cancel(order)
    return put(await call(updateOrder, { params: { id: order.id }, body: { lines, version: order.version } }))
  }

  const setPacks = (order: Order, binId: string, packs: number): Promise<Order> =>
    change(
      order,
      linesOf(order).map((line) => (line.binId === binId ? { binId, packs } : line)),
    )

  const remove = (order: Order, binId: string): Promise<Order> =>
    change(
      order,
      linesOf(order).filter((line) => line.binId !== binId),
    )

  const send = async (order: Order): Promise<Order> => put(await call(sendOrder, { params: { id: order.id } }))
  const cancel = async (order: Order, reason?: string): Promise<Order> =>
    put(await call(cancelOrder, { params: { id: order.id }, body: reason ? { reason } : {} }))
  const acknowledge = async (order: Order, expectedOn?: string): Promise<Order> =>
    put(await call(acknowledgeOrder, { params: { id: order.id }, body: expectedOn ? { expectedOn } : {} }))

  useSessionStore().onClearReads(() => {
    worklist.value = null
    orders.value = null
    gaps.value = null
    draftId.value = null
  })

  return {
    worklist,
    orders,
    gaps,
    draftId,
    drafts,
    draft,
    loadWorklist,
    loadOrders,
    loadOrder,
    loadGaps,
    addLines,
    add,
    setPacks,
    remove,
    send,
    cancel,
    acknowledge,
  }
})
