import { DateTime } from 'luxon'
import type { Order } from '#shared/contracts/replenishment.ts'

interface Where {
  hospital: string
  timeZone: string
  senderName: string
}

const day = (iso: string): string => DateTime.fromISO(iso, { zone: 'utc' }).toFormat('cccc d LLLL yyyy')

/** An order as plain text: packs and units both, so that neither side can read one for the other. */
export function orderMail(order: Order, where: Where): { subject: string; body: string } {
  const kind = order.supplierKind === 'stores' ? 'Requisition' : 'Order'
  const sent = DateTime.fromISO(order.sentAt ?? order.createdAt).setZone(where.timeZone)
  const lines = order.lines.map((l, i) => {
    const packs = `${l.packs} × ${l.orderUnit} of ${l.packSize} = ${l.units} units`
    return `${String(i + 1).padStart(3)}. ${l.itemName}\n     ${packs}\n     for ${l.roomName}, place ${l.binDisplay}`
  })
  const body = [
    `${kind} ${order.number}`,
    `${where.hospital}, ${sent.toFormat("d LLLL yyyy 'at' HH:mm")}`,
    '',
    `To: ${order.supplierName}`,
    ...(order.expectedOn ? [`Expected: ${day(order.expectedOn)}`] : []),
    '',
    ...lines,
    '',
    `Sent by ${where.senderName}. Quote ${order.number} in every answer.`,
  ]
  return { subject: `${kind} ${order.number}, ${where.hospital}`, body: body.join('\n') }
}
