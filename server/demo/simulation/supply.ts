import { arrivalOf, nextSlot, type OrderCalendar } from '#shared/calendar/order-calendar.ts'
import { calendarOf } from '../../catalogue/calendar.service.ts'
import { holidaysBetween } from '../catalogue/holidays.ts'
import type { DemoRoom } from '../catalogue/places.ts'
import { hospital, suppliers } from '../catalogue/places.ts'
import { atHour, localDate, workingDaysLater as laterBy, type Day } from './days.ts'
import { keyed } from './keyed.ts'

const minuteMs = 60_000
const hourMs = 60 * minuteMs

/** One order day of a supplier as one coordinator lives it. */
export interface Slot {
  supplier: string
  coordinator: string
  /** The supplier's cut-off. */
  cutOff: number
  /** When the coordinator goes through the list. */
  decidedAt: number
  sentAt: number
  expectedOn: string
  expectedAt: number
  ordinal: number
  /** The local date of the list. */
  date: string
}

/** Years in which the demo hospital may be started or left alone. */
const years = { from: 2020, to: 2080 }
const holidays = new Set(holidaysBetween(years.from, years.to).map((day) => day.date))

export const isWorkingDay = (day: Pick<Day, 'date' | 'weekday'>): boolean => day.weekday <= 5 && !holidays.has(day.date)

const calendars = new Map(
  suppliers.map((s) => {
    const calendar = calendarOf({ ...s }, hospital.timeZone, { supplier: holidays, ward: holidays })
    return [s.code, calendar as OrderCalendar] as const
  }),
)

export function calendarOfSupplier(code: string): OrderCalendar {
  const calendar = calendars.get(code)
  if (!calendar) throw new RangeError(`no supplier ${code}`)
  return calendar
}

const expected = new Map<string, { expectedAt: number; expectedOn: string }>()

/** When an order for that cut-off should come; asked for thousands of times, so kept. */
function expectation(supplier: string, cutOff: number) {
  const key = `${supplier}/${cutOff}`
  const known = expected.get(key)
  if (known) return known
  const expectedAt = arrivalOf(calendarOfSupplier(supplier), cutOff)
  const made = { expectedAt, expectedOn: localDate(expectedAt, hospital.timeZone) }
  expected.set(key, made)
  return made
}

/** Two coordinators share the wards. */
export const coordinatorOf = (room: Pick<DemoRoom, 'ward'>): string =>
  ['ALD', 'BIR', 'HAZ'].includes(room.ward) ? '3011' : '3012'

/** How often a coordinator does not get round to ordering on an order day. */
const missedDays = 0.05

/** Order days of a supplier within the days given; without `all` those on which the coordinator got round to it. */
export function slotsOf(supplierCode: string, coordinator: string, days: readonly Day[], all = false): Slot[] {
  const supplier = suppliers.find((s) => s.code === supplierCode)
  if (!supplier) throw new RangeError(`no supplier ${supplierCode}`)
  const [hour = 0, minute = 0] = supplier.cutOff.split(':').map(Number)
  return days
    .filter((day) => supplier.orderDays.includes(String(day.weekday)) && !holidays.has(day.date))
    .flatMap((day) => {
      const random = keyed('slot', supplierCode, coordinator, day.ordinal)
      if (random() < missedDays && !all) return []
      const cutOff = atHour(day, hour + minute / 60)
      const decidedAt = cutOff - Math.round((25 + random() * 70) * minuteMs)
      return [slotAt(supplierCode, coordinator, cutOff, decidedAt, day)]
    })
}

function slotAt(
  supplier: string,
  coordinator: string,
  cutOff: number,
  decidedAt: number,
  day: Pick<Day, 'ordinal' | 'date'>,
): Slot {
  return {
    supplier,
    coordinator,
    cutOff,
    decidedAt,
    sentAt: decidedAt + 4 * minuteMs,
    ordinal: day.ordinal,
    date: day.date,
    ...expectation(supplier, cutOff),
  }
}

/** The order day that an order sent at that moment belongs to. */
export function slotOfOrder(supplier: string, coordinator: string, sentAt: number): Slot {
  const cutOff = nextSlot(calendarOfSupplier(supplier), sentAt)
  return slotAt(supplier, coordinator, cutOff, sentAt, { ordinal: 0, date: '' })
}

/** Working days by which a delivery comes late, with how often; central stores are close by. */
const delays: Record<'stores' | 'outside', [share: number, workingDays: number][]> = {
  stores: [
    [0.9, 0],
    [0.97, 1],
    [1, 2],
  ],
  outside: [
    [0.72, 0],
    [0.89, 1],
    [0.96, 2],
    [1, 4],
  ],
}

/** The moment some working days later, at the same hour of the wall clock. */
export const workingDaysLater = (ms: number, days: number): number => laterBy(ms, days, hospital.timeZone, holidays)

const arrivals = new Map<string, number>()

/** When the delivery of a slot stands in the building. */
export function arrivedAt(slot: Slot): number {
  const key = `${slot.supplier}/${slot.coordinator}/${slot.cutOff}`
  const known = arrivals.get(key) ?? drawArrival(slot)
  arrivals.set(key, known)
  return known
}

function drawArrival(slot: Slot): number {
  const random = keyed('delivery', slot.supplier, slot.coordinator, slot.cutOff)
  const kind = suppliers.find((s) => s.code === slot.supplier)?.kind ?? 'outside'
  const draw = random()
  const late = delays[kind].find(([share]) => draw < share)?.[1] ?? 0
  return workingDaysLater(slot.expectedAt + Math.round((random() - 0.35) * 2 * hourMs), late)
}

export interface PutAway {
  at: number
  packs: number
}

/** When one place's part of a delivery is put on its shelf: mostly at once, sometimes in two goes. */
export function putAways(slot: Slot, bin: string, packs: number): PutAway[] {
  const random = keyed('put-away', slot.supplier, slot.cutOff, bin)
  const at = arrivedAt(slot) + Math.round((0.4 + random() * 4) * hourMs)
  if (packs < 2 || random() >= 0.06) return [{ at, packs }]
  const first = Math.floor(packs / 2)
  return [
    { at, packs: first },
    { at: workingDaysLater(at, 2), packs: packs - first },
  ]
}
