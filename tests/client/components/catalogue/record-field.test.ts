import { describe, expect, it } from 'vitest'
import { changedOnly, toBody, toForm, type RecordField } from '#src/components/catalogue/records/record-field.ts'
import { settingsBody, settingsValues } from '#src/components/catalogue/records/settings-form.ts'

const field = (more: Partial<RecordField>): RecordField => ({ name: 'x', label: 'X', type: 'text', ...more })
const words = { number: 'a number, such as 12', needed: 'cannot be empty' }

describe('record forms', () => {
  it('keeps what was typed and says what a number looks like', () => {
    const { body, errors } = toBody([field({ type: 'whole' })], { x: 'twelve' }, words)
    expect(errors).toEqual({ x: 'a number, such as 12' })
    expect(body).toEqual({})
  })

  it('says what has to be filled in, and starts a new record with the usual', () => {
    expect(toBody([field({ type: 'decimal' })], { x: '' }, words).errors).toEqual({ x: 'cannot be empty' })
    expect(toBody([field({ type: 'pick' })], { x: '' }, words).errors).toEqual({ x: 'cannot be empty' })
    expect(toBody([field({ type: 'pick', nullable: true })], { x: '' }, words)).toEqual({
      body: { x: null },
      errors: {},
    })
    expect(toForm(field({ type: 'whole', start: '7' }), undefined)).toBe('7')
    expect(toForm(field({ type: 'whole', start: '7' }), 3)).toBe('3')
    expect(toForm(field({ type: 'whole', start: '7' }), null)).toBe('')
  })

  it('sends null for an emptied number that may be unknown and leaves a missing one out', () => {
    expect(toBody([field({ type: 'decimal', nullable: true })], { x: '' }, words).body).toEqual({ x: null })
    expect(toBody([field({ type: 'decimal', optional: true })], { x: '' }, words)).toEqual({ body: {}, errors: {} })
    expect(toBody([field({ type: 'decimal' })], { x: '0,5' }, words).body).toEqual({ x: 0.5 })
  })

  it('leaves an empty password alone', () => {
    const { body } = toBody([field({ name: 'password', type: 'password' })], { password: '' }, words)
    expect(changedOnly(body, { password: undefined })).toEqual({})
  })

  it('sends only what changed', () => {
    expect(changedOnly({ name: 'Alder', ids: ['1'] }, { name: 'Alder', ids: ['1', '2'] })).toEqual({ ids: ['1'] })
  })

  it('tells every room from no room', () => {
    expect(toForm(field({ type: 'rooms' }), null)).toBeNull()
    expect(toForm(field({ type: 'rooms' }), ['3'])).toEqual(['3'])
  })
})

describe('hospital settings', () => {
  const hospital = {
    name: 'Tallowmere General',
    timeZone: 'Europe/London',
    binWord: 'bin' as const,
    currency: 'GBP',
    levels: { V: 0.9931, E: 0.975, D: 0.95 },
    floor: 0.9,
    ceiling: 0.999,
    twoPersons: false,
    vitalPolicyText: '',
    vitalPolicyLink: '',
    resupplyPhone: '',
    orderingCost: 10,
    holdingRatePerYear: 0.2,
    calendarId: null,
    pooling: true,
    demo: true,
  }

  it('changes no level by showing it in odds', () => {
    const body = settingsBody({ ...settingsValues(hospital) }, hospital)
    expect(body).toMatchObject({ levels: hospital.levels, floor: 0.9, ceiling: 0.999 })
  })

  it('stores odds as a share', () => {
    const body = settingsBody({ ...settingsValues(hospital), levelV: 400 }, hospital)
    expect(body.levels).toEqual({ V: 0.9975, E: 0.975, D: 0.95 })
  })
})
