import { describe, expect, it } from 'vitest'
import type { Room } from '#shared/contracts/catalogue.ts'
import { createPlannedChange, type PlannedChange } from '#shared/contracts/planned-changes.ts'
import {
  factorToTake,
  fromPlannedForm,
  placeOptions,
  plannedErrors,
  toPlannedForm,
} from '#src/components/planned/planned-form.ts'
import { plannedWords } from '#src/i18n/en.ts'

const filled = {
  ...toPlannedForm(null),
  name: ' Winter ',
  place: 'ward:3',
  factor: '1,4',
  startsOn: '2026-12-10',
  endsOn: '2027-02-28',
  reason: 'Cold months',
}
const room = (id: string, wardId: string, wardName: string): Room => ({
  id,
  code: `R${id}`,
  name: `Room ${id}`,
  wardId,
  wardName,
  wardKind: 'general',
  countEveryDays: 7,
  countDays: '',
  mode: 'calculated',
  bins: 1,
  below: 0,
  retired: false,
})

describe('the form of a planned change', () => {
  it('makes a request that the contract takes, with the figures of its kind alone', () => {
    const { body, scope, errors } = fromPlannedForm({ ...filled, unitsPerCase: '12', weekdays: '25' })
    expect(errors).toEqual({})
    const request = createPlannedChange.body.parse({ ...body, ...scope, kind: 'factor' })
    expect(request).toMatchObject({ name: 'Winter', factor: 1.4, unitsPerCase: null, weekdays: '', wardId: '3' })
    expect(request.roomId).toBeNull()
  })

  it('says every field that is missing, and none that the kind does not need', () => {
    const empty = toPlannedForm(null)
    expect(Object.keys(fromPlannedForm(empty).errors).sort()).toEqual([
      'endsOn',
      'factor',
      'name',
      'reason',
      'startsOn',
    ])
    const closed = fromPlannedForm({ ...empty, kind: 'closed', openEnd: true, itemIds: ['4'] })
    expect(Object.keys(closed.errors).sort()).toEqual(['name', 'reason', 'startsOn'])
    expect(closed.body.endsOn).toBeNull()
    expect(closed.scope.itemIds).toEqual([])
    expect(fromPlannedForm({ ...filled, factor: '-2' }).errors).toHaveProperty('factor')
  })

  it('brings refused fields to the ones on screen', () => {
    expect(plannedErrors({ roomId: 'no such room', 'itemIds-0': 'not an id' })).toEqual({
      place: 'no such room',
      itemIds: 'not an id',
    })
  })

  it('offers wards with their rooms, and rooms alone to people who have only some', () => {
    const rooms = [room('1', '3', 'Alder'), room('2', '4', 'Birch'), { ...room('5', '4', 'Birch'), retired: true }]
    expect(placeOptions(rooms, false).map(({ value }) => value)).toEqual(['ward:3', 'room:1', 'ward:4', 'room:2'])
    expect(placeOptions(rooms, true).map(({ value }) => value)).toEqual(['room:1', 'room:2'])
  })

  it('offers last year’s factor as it can be entered, and none that changes nothing', () => {
    expect(factorToTake(1.4049)).toBe('1.4')
    expect(factorToTake(27)).toBe('20')
    expect(factorToTake(0)).toBe('0.05')
    expect(factorToTake(1.004)).toBeNull()
    expect(factorToTake(null)).toBeNull()
  })
})

describe('the words of a planned change', () => {
  const change = (more: Partial<PlannedChange>): PlannedChange => ({
    id: '1',
    name: 'Winter',
    wardId: null,
    roomId: null,
    itemIds: [],
    kind: 'factor',
    factor: 2,
    unitsPerCase: null,
    casesPerDay: null,
    weekdays: '',
    startsOn: '2026-12-10',
    endsOn: '2026-12-20',
    reason: '',
    placeName: 'Alder',
    itemNames: [],
    bins: 3,
    state: 'now',
    seen: { factor: 1.7, intervals: 12, used: 1.8 },
    byName: '',
    createdAt: '2026-12-01T00:00:00.000Z',
    ...more,
  })

  it('put entered against seen', () => {
    expect(plannedWords.seen(change({}))).toBe('entered 2, seen 1.7 from 12 stretches, used 1.8')
    expect(plannedWords.seen(change({ seen: null }))).toBeNull()
  })

  it('say what and when, shortly', () => {
    const cases = change({ kind: 'cases', unitsPerCase: 12, casesPerDay: 1, weekdays: '25', endsOn: null })
    expect(plannedWords.of(cases)).toBe('12 for each case, 1 case on Tue, Fri')
    expect(plannedWords.span(cases)).toBe('from 10 December 2026 until further notice')
    expect(plannedWords.span(change({}))).toBe('10 December to 20 December 2026')
    expect(plannedWords.effect(cases)).not.toContain('before it ends')
  })
})
