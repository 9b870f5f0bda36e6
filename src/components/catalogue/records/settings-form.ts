import type { Hospital } from '#shared/contracts/hospital.ts'
import { calendarWords, fieldWords as w, oddsIn } from '#src/i18n/en.ts'
import type { FormValues, RecordField } from './record-field.ts'

const aim = (name: string, label: string): RecordField => ({ name, type: 'whole', label, suffix: w.cycles, half: true })

/** The hospital's settings as a form; aims are said in odds and stored as shares. */
export const settingsFields: readonly RecordField[] = [
  { name: 'name', type: 'text', ...w.hospitalName, half: true },
  { name: 'timeZone', type: 'text', ...w.timeZone, half: true },
  {
    name: 'binWord',
    type: 'choice',
    ...w.binWord,
    options: ['bin', 'place', 'shelf place'].map((value) => ({ value, label: value })),
    half: true,
  },
  { name: 'currency', type: 'text', ...w.currency, half: true },
  {
    name: 'calendarId',
    type: 'pick',
    ...w.hospitalCalendar,
    source: 'calendars',
    nullable: true,
    empty: calendarWords.noCalendar,
    half: true,
  },
  { name: 'pooling', type: 'check', ...w.pooling, half: true },
  aim('levelV', w.levelV.label),
  aim('levelE', w.levelE.label),
  aim('levelD', w.levelD.label),
  aim('floor', w.floor.label),
  aim('ceiling', w.ceiling.label),
  { name: 'twoPersons', type: 'check', ...w.twoPersons, half: true },
  { name: 'vitalPolicyText', type: 'multiline', ...w.vitalPolicyText },
  { name: 'vitalPolicyLink', type: 'text', ...w.vitalPolicyLink, half: true },
  { name: 'resupplyPhone', type: 'text', ...w.resupplyPhone, half: true },
  { name: 'orderingCost', type: 'decimal', ...w.orderingCost, half: true },
  { name: 'holdingRatePerYear', type: 'decimal', ...w.holdingRatePerYear, half: true },
]

const toOdds = (level: number): string => String(oddsIn(level))
const toLevel = (n: unknown): number => Math.round((1 - 1 / Number(n)) * 1e6) / 1e6

export function settingsValues(hospital: Hospital): FormValues {
  return {
    ...hospital,
    calendarId: hospital.calendarId ?? '',
    levelV: toOdds(hospital.levels.V),
    levelE: toOdds(hospital.levels.E),
    levelD: toOdds(hospital.levels.D),
    floor: toOdds(hospital.floor),
    ceiling: toOdds(hospital.ceiling),
    orderingCost: String(hospital.orderingCost),
    holdingRatePerYear: String(hospital.holdingRatePerYear),
    levels: null,
  }
}

/** A level is sent only when its odds were changed, so that rounding them for the form changes nothing. */
export function settingsBody(body: Record<string, unknown>, before: Hospital): Record<string, unknown> {
  const { levelV, levelE, levelD, floor, ceiling, ...rest } = body
  const level = (typed: unknown, present: number): number =>
    typed === undefined || String(typed) === toOdds(present) ? present : toLevel(typed)
  return {
    ...rest,
    levels: { V: level(levelV, before.levels.V), E: level(levelE, before.levels.E), D: level(levelD, before.levels.D) },
    floor: level(floor, before.floor),
    ceiling: level(ceiling, before.ceiling),
  }
}

/** Field names of refused levels, as the form calls them. */
export function settingsErrors(errors: Record<string, string>): Record<string, string> {
  return Object.fromEntries(
    Object.entries(errors).map(([name, detail]) => [name.replace(/^levels-([VED])$/, 'level$1'), detail]),
  )
}
