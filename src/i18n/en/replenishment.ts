import type { Bin } from '#shared/contracts/bins.ts'
import type { Order, OrderState } from '#shared/contracts/replenishment.ts'
import { counted, dueOn, quantity } from './format.ts'

type Line = Order['lines'][number]

const stateWords: Record<OrderState, string> = {
  draft: 'draft',
  sent: 'sent',
  acknowledged: 'confirmed',
  'part-received': 'partly put away',
  closed: 'put away',
  cancelled: 'cancelled',
  'recorded-elsewhere': 'recorded elsewhere',
}

/** Units of a line that are still to come. */
export const openUnits = (line: Pick<Line, 'units' | 'receivedUnits' | 'cancelledUnits'>): number =>
  Math.max(0, line.units - line.receivedUnits - line.cancelledUnits)

const packs = (n: number, unit: string, size: number): string =>
  size > 1 ? `${counted(n, unit)} of ${quantity(size)}` : counted(n, unit)

export const replenishmentWords = {
  title: 'Restock',
  worklist: 'To order',
  orders: 'Orders',
  packs,
  /** "works out at 2 boxes (100)". */
  worksOut: (n: number, unit: string, size: number): string =>
    `works out at ${counted(n, unit)}${size > 1 ? ` (${quantity(n * size)})` : ''}`,
  state: (state: OrderState): string => stateWords[state],
  binOrders: 'Orders',
  binOnOrder: (bin: Bin, today: string): string => {
    if (bin.onOrder <= 0) return 'Nothing is on its way.'
    const arrived = bin.arrived > 0 ? `, ${quantity(bin.arrived)} of it in the building` : ''
    const due = bin.expectedOn ? `, due ${dueOn(bin.expectedOn, today)}` : ''
    return `${quantity(bin.onOrder)} on order${due}${arrived}.`
  },
  lineState: (order: Pick<Order, 'state'>, line: Line): string =>
    order.state === 'draft'
      ? `${packs(line.packs, line.orderUnit, line.packSize)} in a draft`
      : `${quantity(openUnits(line))} to come, ${stateWords[order.state]}`,
  due: (when: string): string => `due ${when}`,
} as const
