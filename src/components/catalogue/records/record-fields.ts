import {
  calendarWords,
  fieldWords as w,
  roleWords,
  roomModeWords,
  vedWords,
  wardKindWords,
  type RecordKind,
} from '#src/i18n/en.ts'
import type { RecordField } from './record-field.ts'

const choices = (words: Record<string, string>): { value: string; label: string }[] =>
  Object.entries(words).map(([value, label]) => ({ value, label }))

const modes = Object.fromEntries(
  Object.entries(roomModeWords).map(([value, { label, hint }]) => [
    value,
    `${label}: ${hint.charAt(0).toLowerCase()}${hint.slice(1)}`,
  ]),
)

const code: RecordField = { name: 'code', type: 'text', ...w.code, half: true }
const calendar = (words: { label: string; hint: string }): RecordField => ({
  name: 'calendarId',
  type: 'pick',
  ...words,
  source: 'calendars',
  nullable: true,
  empty: calendarWords.theHospitals,
  half: true,
})
const name: RecordField = { name: 'name', type: 'text', ...w.name, half: true }

/** The fields of every kind of record, in the order of the form. */
export const recordFields: Record<RecordKind, readonly RecordField[]> = {
  wards: [
    name,
    code,
    { name: 'kind', type: 'choice', ...w.wardKind, options: choices(wardKindWords), half: true },
    { name: 'site', type: 'text', ...w.site, half: true },
    calendar(w.wardCalendar),
  ],
  rooms: [
    name,
    code,
    { name: 'wardId', type: 'pick', ...w.wardId, source: 'wards', half: true },
    { name: 'countEveryDays', type: 'decimal', ...w.countEveryDays, start: '7', half: true },
    { name: 'countDays', type: 'days', ...w.countDays },
    { name: 'mode', type: 'choice', ...w.mode, options: choices(modes) },
  ],
  items: [
    name,
    code,
    { name: 'orderName', type: 'text', ...w.orderName },
    { name: 'ved', type: 'choice', ...w.ved, options: choices(vedWords), start: 'E', half: true },
    { name: 'category', type: 'text', ...w.category, half: true },
    { name: 'unitOfUse', type: 'text', ...w.unitOfUse, start: 'each', half: true },
    { name: 'unitCode', type: 'text', ...w.unitCode, start: 'C62', half: true },
    { name: 'countUnit', type: 'text', ...w.countUnit, half: true },
    { name: 'countNote', type: 'text', ...w.countNote, half: true },
    { name: 'supplierId', type: 'pick', ...w.supplierId, source: 'suppliers', nullable: true, half: true },
    { name: 'supplierItem', type: 'text', ...w.supplierItem, half: true },
    { name: 'orderUnit', type: 'text', ...w.orderUnit, half: true },
    { name: 'unitsPerOrder', type: 'whole', ...w.unitsPerOrder, start: '1', half: true },
    { name: 'price', type: 'decimal', ...w.price, nullable: true, half: true },
    { name: 'shelfLifeDays', type: 'whole', ...w.shelfLifeDays, nullable: true, half: true },
    { name: 'minShelfDays', type: 'whole', ...w.minShelfDays, nullable: true, half: true },
    { name: 'gtins', type: 'gtins', ...w.gtins },
    { name: 'lookalikeIds', type: 'picks', ...w.lookalikeIds, source: 'items' },
    { name: 'latex', type: 'check', ...w.latex, half: true },
    { name: 'coldChain', type: 'check', ...w.coldChain, half: true },
  ],
  suppliers: [
    name,
    code,
    {
      name: 'kind',
      type: 'choice',
      ...w.supplierKind,
      options: choices(w.supplierKinds),
      start: 'outside',
      half: true,
    },
    { name: 'email', type: 'email', ...w.orderEmail, half: true },
    { name: 'orderDays', type: 'days', ...w.orderDays },
    { name: 'cutOff', type: 'time', ...w.cutOff, half: true },
    { name: 'leadWorkingDays', type: 'whole', ...w.leadWorkingDays, start: '1', half: true },
    { name: 'arrivalDays', type: 'days', ...w.arrivalDays },
    { name: 'arrivalTime', type: 'time', ...w.arrivalTime, start: '14:00', half: true },
    calendar(w.supplierCalendar),
    { name: 'minimumOrder', type: 'decimal', ...w.minimumOrder, start: '0', half: true },
    { name: 'leadTimeDays', type: 'decimal', ...w.leadTimeDays, nullable: true, half: true },
    { name: 'leadTimeSd', type: 'decimal', ...w.leadTimeSd, nullable: true, half: true },
  ],
  bins: [
    { name: 'roomId', type: 'pick', ...w.roomId, source: 'rooms', half: true },
    { name: 'itemId', type: 'pick', ...w.itemId, source: 'items', nullable: true, half: true },
    { name: 'code', type: 'text', ...w.binCode, only: 'new', half: true },
    { name: 'walkOrder', type: 'whole', ...w.walkOrder, optional: true, half: true },
    { name: 'bay', type: 'text', ...w.bay, half: true },
    { name: 'shelf', type: 'text', ...w.shelf, half: true },
    { name: 'kind', type: 'choice', ...w.binKind, options: choices(w.binKinds), half: true },
    { name: 'overflowOf', type: 'pick', ...w.overflowOf, source: 'bins', nullable: true, half: true },
    { name: 'capacity', type: 'whole', ...w.capacity, nullable: true, half: true },
    { name: 'enteredReorderPoint', type: 'whole', ...w.enteredReorderPoint, nullable: true, half: true },
    { name: 'enteredPar', type: 'whole', ...w.enteredPar, nullable: true, half: true },
  ],
  people: [
    name,
    { name: 'email', type: 'email', ...w.email, half: true, autocomplete: 'off' },
    { name: 'staffCode', type: 'text', ...w.staffCode, half: true },
    { name: 'role', type: 'choice', ...w.role, options: choices(roleWords), half: true },
    { name: 'password', type: 'password', ...w.password, only: 'new', half: true, autocomplete: 'new-password' },
    {
      name: 'password',
      type: 'password',
      ...w.passwordChange,
      only: 'existing',
      half: true,
      autocomplete: 'new-password',
    },
    { name: 'roomIds', type: 'rooms', ...w.roomIds, source: 'rooms' },
  ],
}
