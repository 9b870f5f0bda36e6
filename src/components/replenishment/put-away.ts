import { uuidv7 } from 'uuidv7'
import type { Bin } from '#shared/contracts/bins.ts'
import type { SnapshotOpenLine } from '#shared/contracts/counts.ts'
import type { Order } from '#shared/contracts/replenishment.ts'
import type { z } from 'zod'
import { openUnits } from '#src/i18n/en.ts'
import type { NewEntry } from '#src/services/outbox.ts'

/** One order line to be put on its shelf. Quantities in units of use. */
export interface PutAwayTarget {
  orderLineId: string
  binId: string
  itemId: string
  roomId: string
  roomName: string
  binDisplay: string
  itemName: string
  /** Empty where this phone does not know it. */
  unit: string
  /** What is still to come of the line. */
  open: number
}

const onItsWay = new Set<Order['state']>(['sent', 'acknowledged', 'part-received'])

/** From an order's own line; null when nothing of it is on its way. */
export function targetOfLine(order: Order, line: Order['lines'][number], waiting: number): PutAwayTarget | null {
  const open = openUnits(line) - waiting
  if (!onItsWay.has(order.state) || open <= 0) return null
  const { id, binId, itemId, roomId, roomName, binDisplay, itemName } = line
  return { orderLineId: id, binId, itemId, roomId, roomName, binDisplay, itemName, unit: '', open }
}

/** From what this phone keeps of a place; null where the place holds no item. */
export function targetOfBin(bin: Bin, line: z.infer<typeof SnapshotOpenLine>): PutAwayTarget | null {
  if (bin.itemId === null || !bin.item) return null
  return {
    orderLineId: line.orderLineId,
    binId: bin.id,
    itemId: bin.itemId,
    roomId: bin.roomId,
    roomName: bin.roomName,
    binDisplay: bin.display,
    itemName: bin.item.name,
    unit: bin.item.unitOfUse,
    open: line.units,
  }
}

/** The entry for the outbox: a receipt against the line, made on this phone. */
export function putAwayEntry(target: PutAwayTarget, quantity: number): Omit<NewEntry, 'userId' | 'initials'> {
  const { binId, itemId, orderLineId, roomId, binDisplay, itemName, unit } = target
  return {
    op: { opId: uuidv7(), type: 'receipt', binId, itemId, orderLineId, quantity },
    label: { roomId, binId, binDisplay, itemName, unit },
  }
}
