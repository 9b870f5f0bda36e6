import type { Bin } from '#shared/contracts/bins.ts'
import type { GapAhead, Order, OrderState, WorklistRow } from '#shared/contracts/replenishment.ts'
import type { Moment } from './catalogue.ts'
import { counted, dateOf, dayAndClock, decimal, dueOn, dueShort, near, quantity, weekdayOf } from './format.ts'

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

/** "Alder supply room" in a narrow column: "Alder". */
export const shortRoom = (name: string): string => name.replace(/ (supply room|store ?room|store|room)$/i, '')

/** Units of a line that are still to come. */
export const openUnits = (line: Pick<Line, 'units' | 'receivedUnits' | 'cancelledUnits'>): number =>
  Math.max(0, line.units - line.receivedUnits - line.cancelledUnits)

/** "2 boxes of 50"; the size is left out where a pack is one unit. */
const packs = (n: number, unit: string, size: number): string =>
  size > 1 ? `${counted(n, unit)} of ${quantity(size)}` : counted(n, unit)

/** "Thu to Sat", "today", "not within a month": an estimated range that holds 8 times in 10. */
function likelyOut(row: Pick<WorklistRow, 'outBy' | 'states'>, at: Moment): string {
  const today = dateOf(at.now, at.zone)
  const { early, late } = row.outBy
  if (row.states.includes('empty')) return 'empty now'
  if (!early) return 'not within a month'
  const from = dueShort(early, today)
  if (!late) return `from ${from}`
  const to = dueShort(late, today)
  if (from === to) return from
  // "8 to 14 Dec" where both days name the same month.
  const month = /^[0-9]+ (.+)$/.exec(to)?.[1]
  return month && from.endsWith(` ${month}`) ? `${from.slice(0, -month.length - 1)} to ${to}` : `${from} to ${to}`
}

const nextWords = (row: Pick<WorklistRow, 'nextArrival'>, at: Moment): string | null =>
  row.nextArrival ? dueShort(dateOf(row.nextArrival, at.zone), dateOf(at.now, at.zone)) : null

export const replenishmentWords = {
  title: 'Restock',
  worklist: 'To order',
  orders: 'Orders',
  lead: (rows: number): string => (rows === 0 ? 'Nothing below the line' : `${quantity(rows)} below the line`),
  leadRest: (rooms: number): string => `in ${counted(rooms, 'room')}, most at risk first. Estimates from counts.`,
  allRooms: 'All rooms',
  allSuppliers: 'All suppliers',
  room: 'Room',
  supplier: 'Supplier',
  below: 'Below the line',
  mostAtRisk: 'Most at risk first',
  above: 'Above it with what is on order',
  columns: {
    item: 'Item',
    room: 'Room',
    onHand: 'On hand',
    onOrder: 'On order',
    point: 'Reorder point',
    out: 'Likely out',
    suggested: 'Works out at',
    supplier: 'Supplier',
    draft: 'Draft',
  },
  footnote: 'Likely out: an estimated range that holds 8 times in 10. Your judgement and facility policy come first.',
  likelyOut,
  outPhone: (row: WorklistRow, at: Moment): string => {
    const next = nextWords(row, at)
    const out = likelyOut(row, at)
    const words = out === 'empty now' ? 'empty' : out === 'not within a month' ? 'lasts a month' : `out ${out}`
    return next ? `${words}, next ${next}` : words
  },
  next: (row: WorklistRow, at: Moment): string | null => {
    const next = nextWords(row, at)
    return next ? `next ${next}` : null
  },
  packs,
  packsShort: (n: number, unit: string): string => counted(n, unit),
  /** "works out at 2 boxes (100)". */
  worksOut: (n: number, unit: string, size: number): string =>
    `works out at ${counted(n, unit)}${size > 1 ? ` (${quantity(n * size)})` : ''}`,
  cost: (n: number, unit: string, price: string): string => `${counted(n, unit)} cost${n === 1 ? 's' : ''} ${price}`,
  noSupplier: 'No supplier is set for this item. Set one under Hospital, then it can be ordered.',
  none: 'Nothing to order',
  noneWhat: 'Every counted place is above its reorder point, with what is on order.',
  noneYet:
    'There are no places with an item yet. They are added under Hospital; what has to be ordered then appears here.',
  noneFiltered: 'Nothing below the line here.',
  draftTitle: (kind: Order['supplierKind']): string => (kind === 'stores' ? 'Requisition, draft' : 'Order, draft'),
  draftFor: (rooms: number): string => `for ${counted(rooms, 'room')}`,
  draftTo: 'To',
  sendBy: 'Send by',
  forArrival: (when: string): string => `for ${when}`,
  drafts: 'Drafts',
  noDraft: 'No draft yet',
  noDraftWhat: 'Choose a row to see why, then add it. A draft is kept until you send or cancel it.',
  add: (n: number, unit: string): string => `Add ${counted(n, unit)}`,
  change: (n: number, unit: string): string => `Change to ${counted(n, unit)}`,
  added: (number: string): string => `in ${number}`,
  goesTo: (supplier: string): string => `It goes into a draft for ${supplier}.`,
  takeOut: 'Take out',
  howMany: (item: string): string => `Packs of ${item}`,
  sum: (lines: number, packs: number): string => `${counted(lines, 'item')}, ${counted(packs, 'pack')}`,
  reviewAndSend: 'Review and send',
  openDraft: (lines: number): string => `Draft with ${counted(lines, 'item')}`,
  close: 'Close',

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
      ? packs(line.packs, line.orderUnit, line.packSize)
      : `${quantity(openUnits(line))} to come, ${stateWords[order.state]}`,
  toCome: (units: number): string => `${quantity(units)} to come`,
  due: (when: string): string => `due ${when}`,
  risk: (risk: number): string =>
    risk >= 0.95
      ? 'almost certainly out before the next delivery'
      : risk < 0.005
        ? 'hardly likely to run out before the next delivery'
        : `about 1 in ${decimal(1 / risk, 1 / risk < 3 ? 1 : 0)} runs out before the next delivery`,
} as const

type Gap = NonNullable<GapAhead['gap']>
type GapSlot = GapAhead['slots'][number]

/** Orders before a holiday: what would not last over it, and by which order to bring it. */
export const holidayWords = {
  tab: 'Holiday',
  lead: 'What would not last over the closed days, by the order that should bring it. Estimates from counts.',
  heading: (gap: Gap): string => `Before ${gap.name}: ${gap.supplierName}`,
  times: (gap: Gap, at: Moment): string =>
    `Last order ${dayAndClock(gap.lastOrderBy, at.zone)}; it comes ${weekdayOf(gap.lastArrival, at.zone)}. First delivery after it: ${weekdayOf(gap.nextArrival, at.zone)}.`,
  slot: (slot: Pick<GapSlot, 'orderBy'>, at: Moment): string => `Order by ${dayAndClock(slot.orderBy, at.zone)}`,
  comes: (slot: Pick<GapSlot, 'arrives'>, at: Moment): string => `comes ${weekdayOf(slot.arrives, at.zone)}`,
  line: 'to have by then',
  needed: (row: GapSlot['rows'][number]): string => `needs ${quantity(row.needed)} · ${shortRoom(row.roomName)}`,
  shelf: 'shelf too small',
  shelfWhat: 'The shelf cannot take all of it. Bring the rest by the latest order, or keep it elsewhere.',
  columns: { needed: 'To have, estimate', packs: 'Works out at', draft: 'Draft' },
  why: (row: GapSlot['rows'][number], gap: Gap): string =>
    `${quantity(row.onHand)} on hand${row.onOrder > 0 ? ` and ${quantity(row.onOrder)} on order` : ''}. An estimated ${quantity(row.needed)} should stand here to last until the delivery after ${gap.name}, at this place’s own aim.`,
  addAll: (n: number): string => `Add ${n === 1 ? 'it' : `all ${quantity(n)}`} to a draft`,
  added: (order: Pick<Order, 'number' | 'supplierName'>, n: number): string =>
    `${counted(n, 'item')} in ${order.number} for ${order.supplierName}.`,
  nothing: 'Everything lasts over it',
  nothingWhat:
    'Every counted place of this supplier has enough until the first delivery after it, with what is on order.',
  none: 'No holiday is near',
  noneWhat:
    'From ten days before closed days in a supplier’s calendar, this page says what would not last and by which order to bring it.',
} as const

export const orderWords = {
  none: 'No orders yet',
  noneWhat: 'They appear here once a draft is started under “To order”.',
  open: 'Open',
  all: 'All',
  columns: {
    number: 'Number',
    supplier: 'Supplier',
    state: 'State',
    sent: 'Sent',
    expected: 'Expected',
    items: 'Items',
    toCome: 'To come',
  },
  lineColumns: {
    item: 'Item',
    place: 'Place',
    ordered: 'Ordered',
    putAway: 'Put away',
    toCome: 'To come',
    price: 'Price',
  },
  heading: (order: Order): string => (order.supplierKind === 'stores' ? 'Requisition' : 'Order'),
  /** "Requisition draft 448" says its state already. */
  lead: (order: Order, at: Moment): string =>
    [order.supplierName, order.state === 'draft' ? null : stateWords[order.state], orderWords.sentAt(order, at)]
      .filter(Boolean)
      .join(' · '),
  sentAt: (order: Order, at: Moment): string =>
    order.sentAt ? `sent ${near(order.sentAt, at.now, at.zone)}` : `started ${near(order.createdAt, at.now, at.zone)}`,
  expected: (when: string): string => `expected ${when}`,
  late: (when: string): string => `expected ${when}, late`,
  send: 'Send',
  sendTitle: (order: Order): string => `Send ${order.number} to ${order.supplierName}?`,
  sendWhat: (order: Order): string =>
    order.supplierKind === 'stores'
      ? 'It goes to central stores as a requisition. After that it cannot change; what is still to come can be cancelled.'
      : 'It goes to the supplier by e-mail. After that it cannot change; what is still to come can be cancelled.',
  notYet: 'Not yet',
  sent: (order: Order): string => `${order.number} is sent to ${order.supplierName}.`,
  acknowledge: 'Supplier confirmed it',
  acknowledgeTitle: 'When will it come?',
  acknowledgeWhat: 'The day the supplier gave. Leave it empty if they gave none.',
  expectedOn: 'Expected on',
  confirm: 'Save',
  cancel: 'Cancel the order',
  cancelDraft: 'Cancel the draft',
  cancelTitle: (order: Order): string => `Cancel ${order.number}?`,
  cancelWhat: 'What was put away stays in the record. The supplier is not told by this program; phone them.',
  cancelDraftWhat: 'Nothing was sent. Its items go back to the list.',
  cancelReason: 'Reason',
  keep: 'Keep it',
  putAway: 'Put away',
  putAwayTitle: (item: string): string => `Put away: ${item}`,
  putAwayWhat: (room: string, place: string): string => `Only what is on the shelf now, in ${room}, ${place}.`,
  putAwayUnits: 'Units put away',
  putAwayDo: (units: number, unit: string): string => `Put away ${quantity(units)} ${unit}`.trim(),
  onThisPhone: (units: number): string => `${quantity(units)} on this phone`,
  putAwaySaved: (units: number, item: string): string => `${quantity(units)} of ${item} put away. Saved on this phone.`,
  toSend: 'It is sent to the record by itself.',
  total: 'Total',
  withoutPrice: (n: number): string => `without ${counted(n, 'item')} that ${n === 1 ? 'has' : 'have'} no price`,
  fixed: 'Only a draft can be changed.',
} as const
