import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Calendar, CalendarImport } from '#shared/contracts/calendars.ts'
import type { Item, Room, Supplier } from '#shared/contracts/catalogue.ts'
import type { Order, WorklistRow } from '#shared/contracts/replenishment.ts'
import { recurringDays, type DayRule } from '#server/catalogue/recurring-days.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, makeSupplier, operation, sync } from '../support/factories.ts'

let app: TestApp
let coordinator: Caller
let administrator: Caller
let calendar: Calendar

beforeAll(async () => {
  app = await startTestApp()
  coordinator = await app.as('coordinator')
  administrator = await app.as('administrator')
  calendar = (await coordinator.post('/calendars', { name: 'Winter days' })).body as Calendar
})
afterAll(() => app.close())

const pointer = (reply: { status: number; body: { errors?: { pointer: string }[] } }) => [
  reply.status,
  reply.body.errors?.[0]?.pointer,
]
const day = (date: string, name = '') => ({ date, name })

describe('calendars', () => {
  it('are made, changed and read by those who keep the catalogue', async () => {
    expect((await coordinator.get('/calendars/999999')).status).toBe(404)
    expect((await coordinator.patch('/calendars/999999', { name: 'Other' })).status).toBe(404)
    expect((await (await app.as('nurse')).get('/calendars')).status).toBe(403)
    expect((await (await app.as('reviewer')).post('/calendars', { name: 'Mine' })).status).toBe(403)
    expect(pointer(await coordinator.post('/calendars', { name: ' ' }))).toEqual([422, '/name'])
    expect(pointer(await coordinator.post('/calendars', { name: 'winter days' }))).toEqual([422, '/name'])
    const at = `/calendars/${calendar.id}`
    expect(pointer(await coordinator.patch(at, { days: [day('2026-02-30')] }))).toEqual([422, '/days/0/date'])
    const twice = [day('2026-12-25', 'Midwinter'), day('2026-12-25')]
    expect(pointer(await coordinator.patch(at, { days: twice }))).toEqual([422, '/days/1/date'])
    const days = [day('2026-12-28', 'Day after'), day('2026-12-25', 'Midwinter')]
    for (const _again of [1, 2]) {
      const changed = await coordinator.patch(at, { days })
      expect(changed.body).toMatchObject({ days: [days[1], days[0]], isHospital: false, suppliers: 0, wards: 0 })
    }
    expect((await administrator.get(at)).body.days).toHaveLength(2)
    expect((await administrator.get('/calendars')).body).toMatchObject({ total: 1, items: [{ name: 'Winter days' }] })
  })

  it('say which year has no days: the next one from October on, and this one where somebody relies on it', async () => {
    const empty = (await coordinator.post('/calendars', { name: 'Bare' })).body as Calendar
    // 2 November 2026.
    expect(empty.emptyYear).toBe(2027)
    await administrator.patch('/hospital', { calendarId: empty.id })
    expect((await coordinator.get(`/calendars/${empty.id}`)).body).toMatchObject({ emptyYear: 2026, isHospital: true })
    const days = [day('2026-12-25'), day('2027-01-01')]
    expect((await coordinator.patch(`/calendars/${empty.id}`, { days })).body.emptyYear).toBeNull()
    await administrator.patch('/hospital', { calendarId: null })
  })

  it('are not retired while somebody goes by them, and nobody goes by a retired one', async () => {
    const own = (await coordinator.post('/calendars', { name: 'Of one ward' })).body as Calendar
    const room = await makeRoom(app)
    expect(pointer(await coordinator.patch(`/wards/${room.wardId}`, { calendarId: '999999' }))).toEqual([
      422,
      '/calendarId',
    ])
    expect((await coordinator.patch(`/wards/${room.wardId}`, { calendarId: own.id })).body.calendarId).toBe(own.id)
    expect((await coordinator.patch(`/calendars/${own.id}`, { retired: true })).body.code).toBe('in-use')
    await coordinator.patch(`/wards/${room.wardId}`, { calendarId: null })
    expect((await coordinator.patch(`/calendars/${own.id}`, { retired: true })).body.retired).toBe(true)
    expect((await coordinator.get('/calendars?retired=yes')).body.items).toMatchObject([{ id: own.id }])
    for (const reply of [
      await coordinator.patch(`/wards/${room.wardId}`, { calendarId: own.id }),
      await coordinator.post('/suppliers', { code: 'X', name: 'X', kind: 'stores', calendarId: own.id }),
      await administrator.patch('/hospital', { calendarId: own.id }),
    ])
      expect(pointer(reply)[0]).toBe(422)
    expect((await coordinator.post(`/calendars/${own.id}/import`, { text: 'x' })).body.code).toBe('in-use')
  })

  it('refuse to shut a supplier or a room for a whole year', async () => {
    const fridays = (await coordinator.post('/calendars', { name: 'Every Friday' })).body as Calendar
    const supplier = await makeSupplier(app, { orderDays: '5', calendarId: fridays.id })
    const text = file('BEGIN:VEVENT', 'DTSTART;VALUE=DATE:20260102', 'RRULE:FREQ=WEEKLY', 'END:VEVENT')
    expect(pointer(await coordinator.post(`/calendars/${fridays.id}/import`, { text }))).toEqual([422, '/text'])
    await coordinator.patch(`/suppliers/${supplier.id}`, { orderDays: '15' })
    expect((await coordinator.post(`/calendars/${fridays.id}/import`, { text })).status).toBe(200)
    expect(pointer(await coordinator.patch(`/suppliers/${supplier.id}`, { orderDays: '5' }))).toEqual([
      422,
      '/orderDays',
    ])
    const room = await makeRoom(app)
    await coordinator.patch(`/wards/${room.wardId}`, { calendarId: fridays.id })
    expect(pointer(await coordinator.patch(`/rooms/${room.id}`, { countDays: '5' }))).toEqual([422, '/countDays'])
    expect((await coordinator.patch(`/rooms/${room.id}`, { countDays: '45' })).body.countDays).toBe('45')
  })
})

const file = (...lines: string[]): string => ['BEGIN:VCALENDAR', 'VERSION:2.0', ...lines, 'END:VCALENDAR'].join('\r\n')
const event = (name: string, ...lines: string[]): string[] => [
  'BEGIN:VEVENT',
  `UID:${name}`,
  `SUMMARY:${name}`,
  ...lines,
  'END:VEVENT',
]

describe('an iCalendar file', () => {
  it('adds its whole days, and says of the others what to do', async () => {
    const own = (await coordinator.post('/calendars', { name: 'From a file' })).body as Calendar
    const text = file(
      ...event('Midwinter', 'DTSTART;VALUE=DATE:20261225', 'DTEND;VALUE=DATE:20261227'),
      ...event('New year', 'DTSTART;VALUE=DATE:20200101', 'RRULE:FREQ=YEARLY', 'EXDATE;VALUE=DATE:20280101'),
      ...event('Spring', 'DTSTART;VALUE=DATE:20260504', 'RDATE;VALUE=DATE:20270503,20280501'),
      ...event('Not this one', 'DTSTART;VALUE=DATE:20260601', 'STATUS:CANCELLED'),
      ...event('Fair', 'DTSTART;VALUE=DATE:20260907', 'RRULE:FREQ=YEARLY;UNTIL=20280101'),
      ...event('Fair', 'RECURRENCE-ID;VALUE=DATE:20270907', 'DTSTART;VALUE=DATE:20270914'),
      ...event('Leap day', 'DTSTART;VALUE=DATE:20240229', 'RRULE:FREQ=YEARLY'),
      ...event('Never', 'DTSTART;VALUE=DATE:20261101', 'RRULE:FREQ=YEARLY;BYMONTH=2;BYMONTHDAY=30'),
      ...event('Half a day', 'DTSTART:20261224T120000Z', 'DTEND:20261224T180000Z'),
      ...event('By the second', 'DTSTART;VALUE=DATE:20261101', 'RRULE:FREQ=SECONDLY'),
      ...event('No such day', 'DTSTART;VALUE=DATE:20261399'),
      ...event('No day at all'),
    )
    const reply = await coordinator.post(`/calendars/${own.id}/import`, { text })
    const { calendar: made, added, known, left } = reply.body as CalendarImport
    expect(made.days).toEqual([
      // Repeating ones from last year to three years ahead.
      day('2025-01-01', 'New year'),
      day('2026-01-01', 'New year'),
      day('2026-05-04', 'Spring'),
      day('2026-09-07', 'Fair'),
      day('2026-11-01', 'Never'),
      day('2026-12-25', 'Midwinter'),
      day('2026-12-26', 'Midwinter'),
      day('2027-01-01', 'New year'),
      day('2027-05-03', 'Spring'),
      day('2027-09-14', 'Fair'),
      day('2028-02-29', 'Leap day'),
      day('2028-05-01', 'Spring'),
      day('2029-01-01', 'New year'),
    ])
    expect([added, known]).toEqual([13, 0])
    expect(left.map((l) => l.name)).toEqual(['Half a day', 'By the second', 'No such day', 'No day at all'])
    expect(left.every((l) => /by hand/.test(l.why))).toBe(true)
    const again = await coordinator.post(`/calendars/${own.id}/import`, { text })
    expect(again.body).toMatchObject({ added: 0, known: 13 })
  })

  it('may have folded lines and line ends of any kind', async () => {
    const own = (await coordinator.post('/calendars', { name: 'Folded' })).body as Calendar
    const text =
      '\uFEFFBEGIN:VCALENDAR\nVERSION:2.0\r\nBEGIN:VEVENT\rUID:1\r\nSUMMARY:A long na\r\n me\\, folded\nDTSTART;VALUE=DA\n\tTE:20261225\r\nEND:VEVENT\n\nEND:VCALENDAR\r\n'
    const reply = await coordinator.post(`/calendars/${own.id}/import`, { text })
    expect(reply.body.calendar.days).toEqual([day('2026-12-25', 'A long name, folded')])
  })

  it('is refused with what to do when it is none, or far too long', async () => {
    const at = `/calendars/${calendar.id}/import`
    expect((await coordinator.post('/calendars/999999/import', { text: 'x' })).status).toBe(404)
    expect((await (await app.as('nurse')).post(at, { text: 'x' })).status).toBe(403)
    const whole = file(...event('One', 'DTSTART;VALUE=DATE:20261225'))
    for (const text of ['', 'date,name', whole.slice(0, -30), '{}', 'BEGIN:VCARD\nVERSION:4.0\nEND:VCARD', file()]) {
      const reply = await coordinator.post(at, { text })
      expect(pointer(reply), text).toEqual([422, '/text'])
    }
    const daily = file(
      ...event('Always', 'DTSTART;VALUE=DATE:20200101', 'RRULE:FREQ=DAILY'),
      ...event('A year', 'DTSTART;VALUE=DATE:20190101', 'DURATION:P52W'),
    )
    expect(pointer(await coordinator.post(at, { text: daily }))).toEqual([422, '/text'])
    const many = Array.from({ length: 3_001 }, (_, i) => event(`E${i}`, 'DTSTART;VALUE=DATE:20261225')).flat()
    expect(pointer(await coordinator.post(at, { text: file(...many) }))).toEqual([422, '/text'])
  })
})

describe('repeating whole days', () => {
  const rule = (more: Partial<DayRule>): DayRule => ({
    freq: 'YEARLY',
    interval: 1,
    count: null,
    until: null,
    weekStart: 1,
    months: [],
    weekNumbers: [],
    yearDays: [],
    monthDays: [],
    weekdays: [],
    positions: [],
    ...more,
  })
  const on = (weekday: number, nth = 0) => ({ weekday, nth })

  // Examples of RFC 5545, 3.8.5.3, with their dates as printed there.
  it.each<[string, string, DayRule, string[]]>([
    [
      'every other week on Tuesday and Sunday, weeks from Monday',
      '1997-08-05',
      rule({ freq: 'WEEKLY', interval: 2, count: 4, weekdays: [on(2), on(7)] }),
      ['1997-08-05', '1997-08-10', '1997-08-19', '1997-08-24'],
    ],
    [
      'the same, weeks from Sunday',
      '1997-08-05',
      rule({ freq: 'WEEKLY', interval: 2, count: 4, weekStart: 7, weekdays: [on(2), on(7)] }),
      ['1997-08-05', '1997-08-17', '1997-08-19', '1997-08-31'],
    ],
    [
      'every 20th Monday of the year',
      '1997-05-19',
      rule({ weekdays: [on(1, 20)], until: '1999-12-31' }),
      ['1997-05-19', '1998-05-18', '1999-05-17'],
    ],
    [
      'Monday of week 20',
      '1997-05-12',
      rule({ weekNumbers: [20], weekdays: [on(1)], until: '1999-12-31' }),
      ['1997-05-12', '1998-05-11', '1999-05-17'],
    ],
    [
      'every 3rd year on the 1st, 100th and 200th day',
      '1997-01-01',
      rule({ interval: 3, count: 10, yearDays: [1, 100, 200] }),
      [
        '1997-01-01',
        '1997-04-10',
        '1997-07-19',
        '2000-01-01',
        '2000-04-09',
        '2000-07-18',
        '2003-01-01',
        '2003-04-10',
        '2003-07-19',
        '2006-01-01',
      ],
    ],
    [
      'the Tuesday after a Monday in November, every four years',
      '1996-11-05',
      rule({ interval: 4, months: [11], weekdays: [on(2)], monthDays: [2, 3, 4, 5, 6, 7, 8], until: '2004-12-31' }),
      ['1996-11-05', '2000-11-07', '2004-11-02'],
    ],
    [
      'the second last weekday of the month',
      '1997-09-29',
      rule({ freq: 'MONTHLY', weekdays: [1, 2, 3, 4, 5].map((d) => on(d)), positions: [-2], until: '1998-03-31' }),
      ['1997-09-29', '1997-10-30', '1997-11-27', '1997-12-30', '1998-01-29', '1998-02-26', '1998-03-30'],
    ],
    [
      'the last day but two of the month',
      '1997-09-28',
      rule({ freq: 'MONTHLY', monthDays: [-3], until: '1998-02-28' }),
      ['1997-09-28', '1997-10-29', '1997-11-28', '1997-12-29', '1998-01-29', '1998-02-26'],
    ],
    [
      'every 18 months on the 10th to the 15th',
      '1997-09-10',
      rule({ freq: 'MONTHLY', interval: 18, count: 10, monthDays: [10, 11, 12, 13, 14, 15] }),
      [
        ...['1997-09-10', '1997-09-11', '1997-09-12', '1997-09-13', '1997-09-14', '1997-09-15'],
        ...['1999-03-10', '1999-03-11', '1999-03-12', '1999-03-13'],
      ],
    ],
    [
      'every day in January',
      '1998-01-01',
      rule({ freq: 'DAILY', months: [1], until: '1998-01-31' }),
      Array.from({ length: 31 }, (_, i) => `1998-01-${String(i + 1).padStart(2, '0')}`),
    ],
  ])('%s', (_what, start, given, dates) => {
    expect(recurringDays(start, given, '1990-01-01', '2010-12-31')).toEqual(dates)
    // What is left out in front changes nothing behind.
    const later = dates[Math.floor(dates.length / 2)]!
    expect(recurringDays(start, given, later, '2010-12-31')).toEqual(dates.filter((d) => d >= later))
  })
})

describe('closed days', () => {
  let room: Room
  let supplier: Supplier
  let item: Item

  it('move the last order, the expected day and the level, and ask for a new calculation', async () => {
    room = await makeRoom(app)
    supplier = await makeSupplier(app)
    item = await makeItem(app, { supplierId: supplier.id })
    const bin = await makeBin(app, { roomId: room.id, itemId: item.id, enteredReorderPoint: 12, enteredPar: 30 })
    await sync(app, coordinator, [operation(app, { type: 'count', binId: bin.id, quantity: 4 })])
    await app.runJobs()
    const row = async (): Promise<WorklistRow> =>
      ((await coordinator.get(`/worklist?roomId=${room.id}`)).body.items as WorklistRow[])[0]!
    expect(await row()).toMatchObject({ orderBy: '2026-11-02T10:00:00.000Z', nextArrival: '2026-11-03T14:00:00.000Z' })
    // Today and tomorrow closed: the next order is Wednesday's.
    const own = (await coordinator.post('/calendars', { name: 'Stocktaking' })).body as Calendar
    await coordinator.patch(`/suppliers/${supplier.id}`, { calendarId: own.id })
    await app.runJobs()
    await coordinator.patch(`/calendars/${own.id}`, { days: [day('2026-11-02', 'Stocktaking'), day('2026-11-03')] })
    expect(await row()).toMatchObject({ orderBy: '2026-11-04T10:00:00.000Z', nextArrival: '2026-11-05T14:00:00.000Z' })
    expect(await app.runJobs()).toBeGreaterThan(0)
    // The ward takes nothing on Thursday: its goods come on Friday.
    const shut = (await coordinator.post('/calendars', { name: 'Moving day' })).body as Calendar
    await coordinator.patch(`/calendars/${shut.id}`, { days: [day('2026-11-05', 'Moving day')] })
    await coordinator.patch(`/wards/${room.wardId}`, { calendarId: shut.id })
    expect((await row()).nextArrival).toBe('2026-11-06T14:00:00.000Z')
    const order = (await coordinator.post('/orders', { supplierId: supplier.id, lines: [{ binId: bin.id, packs: 1 }] }))
      .body as Order
    expect((await coordinator.post(`/orders/${order.id}/send`)).body.expectedOn).toBe('2026-11-06')
  })
})
