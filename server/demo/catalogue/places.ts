import type { Room, Ward } from '#shared/contracts/catalogue.ts'
import type { Hospital } from '#shared/contracts/hospital.ts'
import type { SupplierFields } from '../../catalogue/places.service.ts'

/** The invented hospital. Levels are starting values, a facility's own choice, not advice. */
export const hospital: Hospital = {
  name: 'Tallowmere General',
  timeZone: 'Europe/London',
  binWord: 'place',
  currency: 'GBP',
  levels: { V: 0.995, E: 0.98, D: 0.95 },
  floor: 0.9,
  ceiling: 0.999,
  twoPersons: false,
  vitalPolicyText:
    'Vital items follow the supply policy of Tallowmere General. If a vital item is missing or its number looks wrong, phone central stores; do not wait for the list.',
  vitalPolicyLink: 'https://intranet.tallowmere.example/supply-policy',
  resupplyPhone: '2210',
  orderingCost: 0,
  holdingRatePerYear: 0.2,
  calendarId: null,
  pooling: true,
  demo: true,
}

export const wards: Omit<Ward, 'id' | 'retired' | 'calendarId'>[] = [
  { code: 'ALD', name: 'Alder', kind: 'general', site: 'Main building' },
  { code: 'BIR', name: 'Birch', kind: 'general', site: 'Main building' },
  { code: 'CED', name: 'Cedar', kind: 'intensive', site: 'Main building' },
  { code: 'ELD', name: 'Elder', kind: 'emergency', site: 'Front building' },
  { code: 'HAZ', name: 'Hazel', kind: 'children', site: 'Garden wing' },
  { code: 'ROW', name: 'Rowan', kind: 'theatre', site: 'Main building' },
  { code: 'LIN', name: 'Linden', kind: 'general', site: 'Main building' },
  { code: 'MAP', name: 'Maple', kind: 'general', site: 'Front building' },
  { code: 'OSI', name: 'Osier', kind: 'general', site: 'Front building' },
  { code: 'POP', name: 'Poplar', kind: 'general', site: 'Garden wing' },
]

export interface DemoRoom {
  /** As item rows name it. */
  key: string
  code: string
  name: string
  ward: string
  countEveryDays: number
  /** Weekdays on which it is counted, as digits; every day without it. */
  countDays?: string
  mode: Room['mode']
  /** It holds what stands in all of these rooms, used as it is in the first of them, give or take. */
  like?: string[]
}

/** Rooms by what they are for: medical, surgical, intensive care, emergency, children, theatres. */
export const rooms: DemoRoom[] = [
  { key: 'A1', code: 'ALD-1', name: 'Alder supply room', ward: 'ALD', countEveryDays: 3, mode: 'calculated' },
  { key: 'A2', code: 'ALD-2', name: 'Alder treatment room', ward: 'ALD', countEveryDays: 7, mode: 'calculated' },
  { key: 'B1', code: 'BIR-1', name: 'Birch supply room', ward: 'BIR', countEveryDays: 4, mode: 'calculated' },
  { key: 'C1', code: 'CED-1', name: 'Cedar supply room', ward: 'CED', countEveryDays: 2, mode: 'calculated' },
  { key: 'C2', code: 'CED-2', name: 'Cedar breathing store', ward: 'CED', countEveryDays: 4, mode: 'calculated' },
  { key: 'E1', code: 'ELD-1', name: 'Elder supply room', ward: 'ELD', countEveryDays: 3, mode: 'calculated' },
  { key: 'H1', code: 'HAZ-1', name: 'Hazel supply room', ward: 'HAZ', countEveryDays: 5, mode: 'beside' },
  {
    key: 'R1',
    code: 'ROW-1',
    name: 'Rowan theatre store',
    ward: 'ROW',
    countEveryDays: 7,
    countDays: '12345',
    mode: 'as-before',
  },
  ...[
    { key: 'L1', code: 'LIN-1', name: 'Linden supply room', ward: 'LIN', countEveryDays: 4 },
    { key: 'M1', code: 'MAP-1', name: 'Maple supply room', ward: 'MAP', countEveryDays: 5 },
    { key: 'O1', code: 'OSI-1', name: 'Osier supply room', ward: 'OSI', countEveryDays: 4 },
    { key: 'P1', code: 'POP-1', name: 'Poplar supply room', ward: 'POP', countEveryDays: 6 },
  ].map((room) => ({ ...room, mode: 'calculated' as const, like: ['A1', 'B1'] })),
]

/** Central stores and three invented suppliers; delivery times as they state them, in days. */
export const suppliers: Omit<SupplierFields, 'calendarId'>[] = [
  {
    code: 'CS',
    name: 'Central stores',
    email: 'central.stores@tallowmere.example',
    kind: 'stores',
    orderDays: '12345',
    cutOff: '10:00',
    arrivalDays: '12345',
    arrivalTime: '14:00',
    leadWorkingDays: 1,
    minimumOrder: 0,
    leadTimeDays: 1.2,
    leadTimeSd: 0.5,
  },
  {
    code: 'FEN',
    name: 'Fenwold Clinical',
    email: 'orders@fenwold.example',
    kind: 'outside',
    orderDays: '14',
    cutOff: '12:00',
    arrivalDays: '12345',
    arrivalTime: '11:00',
    leadWorkingDays: 3,
    minimumOrder: 50,
    leadTimeDays: 4.2,
    leadTimeSd: 1.3,
  },
  {
    code: 'MAR',
    name: 'Marlpit Medical',
    email: 'desk@marlpit.example',
    kind: 'outside',
    orderDays: '25',
    cutOff: '15:00',
    arrivalDays: '1345',
    arrivalTime: '12:00',
    leadWorkingDays: 4,
    minimumOrder: 0,
    leadTimeDays: 6,
    leadTimeSd: 2,
  },
  {
    code: 'TAR',
    name: 'Tarnside Fluids',
    email: 'orders@tarnside.example',
    kind: 'outside',
    orderDays: '135',
    cutOff: '11:00',
    arrivalDays: '12345',
    arrivalTime: '09:00',
    leadWorkingDays: 2,
    minimumOrder: 0,
    leadTimeDays: 2.6,
    leadTimeSd: 0.8,
  },
]
