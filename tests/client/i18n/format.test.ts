import { describe, expect, it } from 'vitest'
import {
  ageOfCount,
  counted,
  day,
  daysAgo,
  decimal,
  dueOn,
  dueShort,
  duration,
  money,
  moment,
  near,
  odds,
  onceIn,
  percent,
  plural,
  quantity,
  signed,
} from '#src/i18n/en.ts'

const zone = 'Europe/London'

describe('numbers', () => {
  it('has no trailing zeros and a zero before the point', () => {
    expect(decimal(6)).toBe('6')
    expect(decimal(6.04)).toBe('6')
    expect(decimal(0.5)).toBe('0.5')
    expect(percent(0.995)).toBe('99.5 %')
    expect(percent(0.99)).toBe('99 %')
  })

  it('signs changes with a true minus', () => {
    expect([signed(3), signed(-2), signed(0)]).toEqual(['+3', '−2', '0'])
    expect(quantity(1250)).toBe('1,250')
  })

  it('makes plain plurals of count units', () => {
    expect(['box', 'each', 'pack', 'case', 'pouch', 'tray', 'assembly'].map(plural)).toEqual([
      'boxes',
      'each',
      'packs',
      'cases',
      'pouches',
      'trays',
      'assemblies',
    ])
    expect([counted(1, 'box'), counted(3, 'box')]).toEqual(['1 box', '3 boxes'])
  })

  it('writes money with two decimals only when there are some', () => {
    expect(money(218.4, 'GBP')).toBe('£218.40')
    expect(money(42, 'GBP')).toBe('£42')
  })
})

describe('odds', () => {
  it('says a level as one delivery cycle in so many', () => {
    expect(odds(0.995)).toBe('about 1 delivery cycle in 200')
    expect(odds(0.975)).toBe('about 1 delivery cycle in 40')
    expect(odds(0.999)).toBe('about 1 delivery cycle in 1,000')
    expect(odds(0.9)).toBe('about 1 delivery cycle in 10')
    expect(odds(1)).toBe('fewer than 1 delivery cycle in 10,000')
  })

  it('says how often that is for one place', () => {
    expect(onceIn(0.995, 26)).toBe('about once in 8 years')
    expect(onceIn(0.975, 40)).toBe('about once a year')
    expect(onceIn(0.9, 52)).toBe('about 5 times a year')
    expect(onceIn(0.999, 0)).toBe('hardly ever')
  })
})

describe('dates', () => {
  it('has the month in letters', () => {
    expect(day('2027-05-12')).toBe('12 May 2027')
    expect(moment('2027-05-12T06:10:00.000Z', zone)).toBe('12 May 2027, 07:10')
  })

  it('says coming days as people do', () => {
    expect(dueOn('2026-05-14', '2026-05-14')).toBe('today')
    expect(dueOn('2026-05-15', '2026-05-14')).toBe('tomorrow')
    expect(dueOn('2026-05-18', '2026-05-14')).toBe('Mon')
    expect(dueOn('2026-05-28', '2026-05-14')).toBe('28 May')
    expect(dueOn('2026-05-12', '2026-05-14')).toBe('12 May')
    expect(dueShort('2026-05-15', '2026-05-14')).toBe('Fri')
  })

  it('counts days by the calendar of the hospital, not by 24 hours', () => {
    // 23:30 and 00:30 in London are two days although one hour apart.
    expect(daysAgo('2026-05-13T22:30:00.000Z', '2026-05-13T23:30:00.000Z', zone)).toBe(1)
    expect(near('2026-05-13T22:30:00.000Z', '2026-05-13T23:30:00.000Z', zone)).toBe('yesterday 23:30')
  })

  it('words ages and lengths', () => {
    expect([0, 1, 9].map(ageOfCount)).toEqual(['counted today', 'counted yesterday', 'counted 9 days ago'])
    expect([0.5, 48, 27 * 60, 4320].map(duration)).toEqual(['less than a minute', '48 minutes', '27 hours', '3 days'])
  })
})
