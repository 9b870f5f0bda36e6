import { DateTime } from 'luxon'
import { beforeAll, describe, expect, it } from 'vitest'
import { binPlans, storyPlan, type BinPlan } from '#server/demo/bin-plan.ts'
import { items, lookalikes } from '#server/demo/catalogue/items.ts'
import { rooms, suppliers, wards } from '#server/demo/catalogue/places.ts'
import { piecesOf } from '#server/demo/live-on.ts'
import { holidaysBetween, holidaysOf } from '#server/demo/catalogue/holidays.ts'
import { dayMs, workingDaysLater } from '#server/demo/simulation/days.ts'
import { demoZone, simulate, untouched, windowOf } from '#server/demo/simulation/simulator.ts'
import type { SimOp, Simulated } from '#server/demo/simulation/sim-types.ts'
import { story } from '#server/demo/story.ts'
import { hasCheckDigit } from '#shared/barcode/gtin.ts'
import { parseShelfCode } from '#shared/barcode/shelf-code.ts'
import { createItem } from '#shared/contracts/catalogue.ts'
import { workingDaysBetween } from '#shared/replenishment/believed.ts'

const plans = binPlans()
const hourMs = dayMs / 24

function history(now: string): { to: number; today: string; made: Simulated; ops: SimOp[] } {
  const to = Date.parse(now)
  const began = DateTime.fromMillis(to, { zone: demoZone }).startOf('day').minus({ days: 181 }).toMillis()
  const window = windowOf({ from: began, to, began }, { last: true, withStories: true })
  const made = simulate(
    plans.map((plan) => untouched(plan, began)),
    window,
  )
  return { to, today: window.today, made, ops: [...made.ops.values()].flat() }
}

describe('the catalogue of the demo hospital', () => {
  it('is as large as promised', () => {
    expect(wards.length).toBeGreaterThanOrEqual(5)
    expect(new Set(wards.map((w) => w.kind)).size).toBeGreaterThanOrEqual(5)
    expect(rooms.length).toBe(12)
    expect(plans.length).toBeGreaterThanOrEqual(300)
    expect(items.length).toBeGreaterThanOrEqual(180)
    expect(suppliers.filter((s) => s.kind === 'stores').length).toBe(1)
    expect(suppliers.length).toBe(4)
  })

  it('holds items that the form would take, each once', () => {
    for (const { uses: _, supplier: __, ...item } of items) {
      const parsed = createItem.body.safeParse({ ...item, supplierId: '1', lookalikeIds: [] })
      expect(parsed.error, item.code).toBeUndefined()
      for (const { gtin } of item.gtins) expect(/^[01]952/.test(gtin) && hasCheckDigit(gtin), gtin).toBe(true)
    }
    for (const key of ['code', 'name', 'orderName'] as const)
      expect(new Set(items.map((i) => i[key])).size).toBe(items.length)
    expect(new Set(items.flatMap((i) => i.gtins.map((g) => g.gtin))).size).toBe(
      items.reduce((n, i) => n + i.gtins.length, 0),
    )
  })

  it('splits vital, essential and desirable items about as hospitals do', () => {
    const share = (ved: string): number => items.filter((i) => i.ved === ved).length / items.length
    expect(share('V')).toBeCloseTo(0.13, 1)
    expect(share('E')).toBeCloseTo(0.56, 1)
    expect(share('D')).toBeCloseTo(0.31, 1)
  })

  it('labels every place with a code of its own, the same on every machine', () => {
    expect(new Set(plans.map((p) => p.code)).size).toBe(plans.length)
    for (const { code } of plans) expect(parseShelfCode(code).ok, code).toBe(true)
    expect(binPlans().map((p) => p.code)).toEqual(plans.map((p) => p.code))
    expect(plans[0]?.code).toBe('UWVFQZKR')
  })

  it('has sensible levels: par above the point, both on the shelf', () => {
    for (const plan of plans) {
      if (plan.overflowOf === null) expect(plan.parLevel, plan.item.name).toBeGreaterThan(plan.reorderPoint)
      expect(plan.capacity, plan.item.name).toBeGreaterThanOrEqual(plan.parLevel)
    }
  })

  it('keeps its holidays, one on a weekend on the next free working day as well', () => {
    expect(holidaysOf(2027).map((day) => day.date)).toEqual([
      ...['2027-01-01', '2027-05-03', '2027-05-31', '2027-08-30'],
      // A Saturday and a Sunday, and the Monday and the Tuesday in their place.
      ...['2027-12-25', '2027-12-26', '2027-12-27', '2027-12-28'],
    ])
  })

  it('puts look-alikes side by side', () => {
    const [one, other] = story.lookalikes.map((place) => storyPlan(plans, place))
    expect(Math.abs(one!.walkOrder - other!.walkOrder)).toBe(10)
    expect(lookalikes.map((pair) => [...pair].sort().join())).toContain(
      [one!.item.code, other!.item.code].sort().join(),
    )
  })
})

const newestCount = (ops: readonly SimOp[]): SimOp | undefined => ops.filter((op) => op.type.startsWith('count')).at(-1)

/** Weekday noon; a night before a working week; the hour clocks go back; a Sunday; the last day of a year. */
const moments = [
  '2026-11-05T14:20:00Z',
  '2026-06-15T00:20:00Z',
  '2026-10-25T01:30:00Z',
  '2027-01-03T09:05:00Z',
  '2026-12-31T18:00:00Z',
]

describe.each(moments)('a history that ends at %s', (now) => {
  let told: ReturnType<typeof history>
  let opsOf: (plan: BinPlan) => SimOp[]
  beforeAll(() => {
    told = history(now)
    opsOf = (plan) => told.made.ops.get(plan.code) ?? []
  })

  it('dates nothing after its end and gives each entry an id of its own', () => {
    const { ops, to, made } = told
    expect(ops.length).toBeGreaterThan(15_000)
    for (const op of ops) if (op.at > op.recordedAt || op.recordedAt > to) expect.fail(`${op.type} at ${op.at}`)
    for (const o of made.orders)
      for (const at of [o.createdAt, o.sentAt, o.acknowledgedAt, o.cancelledAt])
        if (at !== null && at > to) expect.fail(`order ${o.key}`)
    expect(new Set(ops.map((op) => op.opId)).size).toBe(ops.length)
    expect(
      ops.every((op) => /^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/.test(op.opId)),
    ).toBe(true)
    expect(ops.every((op) => Number.isInteger(op.quantity) && op.quantity >= 0 && op.quantity <= 99_999)).toBe(true)
  })

  it('counts in daytime and late shifts by the wall clock', () => {
    const hours = told.ops
      .filter((op) => op.type === 'count')
      .map((op) => DateTime.fromMillis(op.at, { zone: demoZone }))
      .map((at) => at.hour + at.minute / 60)
    expect(Math.min(...hours)).toBeGreaterThan(6.5)
    expect(hours.every((h) => h < 9.5 || (h > 19.5 && h < 21.8))).toBe(true)
    expect(hours.filter((h) => h > 12).length / hours.length).toBeGreaterThan(0.2)
  })

  it('leaves exactly two orders late: one hopelessly, one still believed', () => {
    const { made, today, ops } = told
    const putAway = new Map<string, number>()
    for (const op of ops)
      if (op.type === 'receipt' && op.line) putAway.set(op.line, (putAway.get(op.line) ?? 0) + op.quantity)
    const open = made.orders.filter(
      (o) =>
        ['sent', 'acknowledged'].includes(o.state) &&
        o.lines.some((l) => l.units - l.cancelledUnits > (putAway.get(l.key) ?? 0)),
    )
    const late = open.filter((o) => o.expectedOn < today).sort((a, b) => (a.expectedOn < b.expectedOn ? -1 : 1))
    expect(late.map((o) => o.lines.map((l) => l.bin))).toEqual([
      [storyPlan(plans, story.emptyVital).code],
      [storyPlan(plans, story.lateBelieved).code],
    ])
    expect(workingDaysBetween(late[0]!.expectedOn, today)).toBeGreaterThan(2)
    expect(workingDaysBetween(late[1]!.expectedOn, today)).toBeLessThanOrEqual(2)
    const part = open.filter((o) => o.lines.some((l) => (putAway.get(l.key) ?? 0) > 0))
    expect(part.length).toBeGreaterThan(0)
    for (const state of ['sent', 'acknowledged', 'cancelled', 'recorded-elsewhere'])
      expect(
        made.orders.some((o) => o.state === state),
        state,
      ).toBe(true)
  })

  it('never puts away more of a line than was ordered', () => {
    const units = new Map(told.made.orders.flatMap((o) => o.lines.map((l) => [l.key, l.units] as const)))
    for (const op of told.ops.filter((o) => o.type === 'receipt')) {
      const left = (units.get(op.line ?? '') ?? 0) - op.quantity
      if (left < 0) expect.fail(`${op.line} by ${-left}`)
      units.set(op.line ?? '', left)
    }
  })

  it('orders, delivers and counts on days that are open for it', () => {
    const closed = new Set(holidaysBetween(2026, 2028).map((day) => day.date))
    const dayOf = (ms: number): DateTime => DateTime.fromMillis(ms, { zone: demoZone })
    const isClosed = (ms: number): boolean => closed.has(dayOf(ms).toISODate() ?? '')
    expect(told.made.orders.filter((o) => closed.has(o.expectedOn) || isClosed(o.sentAt))).toEqual([])
    const theatre = new Set(plans.filter((p) => p.room.countDays === '12345').map((p) => p.code))
    const counts = told.ops.filter((op) => op.type === 'count' && theatre.has(op.bin))
    expect(counts.length).toBeGreaterThan(100)
    expect(counts.filter((op) => dayOf(op.at).weekday > 5)).toEqual([])
  })

  it('ends with an empty vital place and eighteen next door', () => {
    expect(newestCount(opsOf(storyPlan(plans, story.emptyVital)))?.quantity).toBe(0)
    const nextDoor = opsOf(storyPlan(plans, story.nextDoor))
    expect(nextDoor.at(-1)).toMatchObject({ type: 'count', quantity: story.nextDoor.onHand })
  })

  it('leaves twelve places of the story ward due and the rest counted within the day', () => {
    const ward = plans.filter((p) => p.room.ward === story.due.ward)
    const due = ward.filter((plan) => {
      const last = newestCount(opsOf(plan))
      return !last || told.to - last.at > plan.room.countEveryDays * dayMs
    })
    expect(due.length).toBe(story.due.places)
    expect(
      due
        .filter((p) => opsOf(p).length === 0)
        .map((p) => p.item.code)
        .sort(),
    ).toEqual(story.neverCounted.map((p) => p.item).sort())
    expect(due.every((p) => p.room.code === story.due.room)).toBe(true)
    for (const plan of ward.filter((p) => !due.includes(p)))
      expect(told.to - newestCount(opsOf(plan))!.at).toBeLessThan(17 * hourMs)
  })

  it('has a delivery that nobody keyed, and a hold', () => {
    const plan = storyPlan(plans, story.neverKeyed)
    const cancelled = told.made.orders.filter((o) => o.cancelReason?.startsWith('Not found on the ward'))
    expect(cancelled.length).toBe(1)
    const line = cancelled[0]!.lines.find((l) => l.bin === plan.code)!
    expect(line.cancelledUnits).toBe(line.units)
    expect(opsOf(plan).some((op) => op.line === line.key)).toBe(false)
    const held = opsOf(storyPlan(plans, story.held)).filter((op) => op.type === 'hold')
    expect(held.map((op) => op.quantity)).toEqual([story.held.units])
  })
})

describe('a history lived in pieces', () => {
  it('is the same when it is told again, and what a day brings does not depend on when it ends', () => {
    const one = history('2026-11-05T14:20:00Z')
    const again = history('2026-11-05T14:20:00Z')
    expect(again.made.orders).toEqual(one.made.orders)
    expect(again.ops).toEqual(one.ops)
    const later = history('2026-11-05T22:00:00Z')
    const old = (h: typeof one): string[] =>
      h.ops.filter((op) => op.at < one.to - 60 * dayMs).map((op) => `${op.opId} ${op.quantity}`)
    expect(old(later)).toEqual(old(one))
  })

  it('cuts a long absence so that the last piece has room for its stories', () => {
    const from = Date.parse('2026-01-01T00:00:00Z')
    for (const days of [0.1, 5, 16, 22, 40, 200]) {
      const ends = piecesOf(from, from + days * dayMs)
      expect(ends.at(-1)).toBe(from + days * dayMs)
      const starts = [from, ...ends.slice(0, -1)]
      expect(ends.every((end, i) => end > starts[i]! && end - starts[i]! <= 30 * dayMs)).toBe(true)
      if (days > 22) expect(ends.at(-1)! - starts.at(-1)!).toBe(21 * dayMs)
    }
  })

  it('counts working days over a weekend and a change of clocks', () => {
    const friday = DateTime.fromISO('2026-10-23T15:00', { zone: demoZone })
    const monday = DateTime.fromMillis(workingDaysLater(friday.toMillis(), 1, demoZone), { zone: demoZone })
    expect(monday.toISO({ includeOffset: false, suppressMilliseconds: true })).toBe('2026-10-26T15:00:00')
  })
})
