import type { Room } from '#shared/contracts/catalogue.ts'
import type { PlannedChange, PlannedChangeKind } from '#shared/contracts/planned-changes.ts'
import { plannedWords as w } from '#src/i18n/en.ts'

/** A planned change as the form holds it: numbers as typed text, so that nothing typed is lost. */
export interface PlannedForm {
  name: string
  /** `ward:3`, `room:12`, or empty for the whole hospital. */
  place: string
  itemIds: string[]
  kind: PlannedChangeKind
  factor: string
  unitsPerCase: string
  casesPerDay: string
  weekdays: string
  startsOn: string
  endsOn: string
  openEnd: boolean
  reason: string
}

const typed = (value: number | null): string => (value === null ? '' : String(value))

export const placeKey = (scope: { wardId: string | null; roomId: string | null }): string =>
  scope.roomId !== null ? `room:${scope.roomId}` : scope.wardId !== null ? `ward:${scope.wardId}` : ''

export function scopeOf(place: string): { wardId: string | null; roomId: string | null } {
  const [kind, id] = place.split(':')
  return { wardId: kind === 'ward' ? id! : null, roomId: kind === 'room' ? id! : null }
}

export function toPlannedForm(change: PlannedChange | null): PlannedForm {
  return {
    name: change?.name ?? '',
    place: change ? placeKey(change) : '',
    itemIds: [...(change?.itemIds ?? [])],
    kind: change?.kind ?? 'factor',
    factor: typed(change?.factor ?? null),
    unitsPerCase: typed(change?.unitsPerCase ?? null),
    casesPerDay: typed(change?.casesPerDay ?? null),
    weekdays: change?.weekdays ?? '',
    startsOn: change?.startsOn ?? '',
    endsOn: change?.endsOn ?? '',
    openEnd: change !== null && change.endsOn === null,
    reason: change?.reason ?? '',
  }
}

const amount = (text: string): number | null => {
  const plain = text.trim().replace(',', '.')
  return /^[0-9]+(\.[0-9]+)?$/.test(plain) ? Number(plain) : null
}

/**
 * What can be changed of a planned change, its place and items, which stay, and what is wrong before it is sent: only
 * what the form alone can know. Figures of another kind are sent as null.
 */
export function fromPlannedForm(form: PlannedForm) {
  const errors: Record<string, string> = {}
  const numberOf = (name: 'factor' | 'unitsPerCase' | 'casesPerDay', kind: PlannedChangeKind): number | null => {
    if (form.kind !== kind) return null
    const value = amount(form[name])
    if (value === null) errors[name] = w.number
    return value
  }
  if (!form.name.trim()) errors.name = w.needName
  if (!form.startsOn) errors.startsOn = w.needDay
  if (!form.endsOn && !form.openEnd) errors.endsOn = w.needEnd
  if (!form.reason.trim()) errors.reason = w.needName
  const body = {
    name: form.name.trim(),
    factor: numberOf('factor', 'factor'),
    unitsPerCase: numberOf('unitsPerCase', 'cases'),
    casesPerDay: numberOf('casesPerDay', 'cases'),
    weekdays: form.kind === 'cases' ? form.weekdays : '',
    startsOn: form.startsOn,
    endsOn: form.openEnd ? null : form.endsOn,
    reason: form.reason.trim(),
  }
  const scope = { ...scopeOf(form.place), itemIds: form.kind === 'closed' ? [] : form.itemIds }
  return { body, scope, errors }
}

/** Refused fields by the name they have in the form: a ward or a room is one field there. */
export const plannedErrors = (errors: Record<string, string>): Record<string, string> =>
  Object.fromEntries(
    Object.entries(errors).map(([name, detail]) => [name.replace(/^(wardId|roomId)$/, 'place').split('-')[0]!, detail]),
  )

/** Wards and rooms to choose from, ward by ward; a person who has only some rooms chooses among those. */
export function placeOptions(rooms: readonly Room[], onlyRooms: boolean): { value: string; label: string }[] {
  const wards = new Map<string, Room[]>()
  for (const room of rooms.filter((one) => !one.retired))
    wards.set(room.wardId, [...(wards.get(room.wardId) ?? []), room])
  const options = [...wards].flatMap(([wardId, inWard]) => {
    const ward = inWard[0]!.wardName
    const own = inWard.map((room) => ({ value: `room:${room.id}`, label: w.roomIn(room.name, ward) }))
    return onlyRooms ? own : [{ value: `ward:${wardId}`, label: w.allOfWard(ward) }, ...own]
  })
  return options
}

/** The factor as a number to type: two decimals at most, within what may be entered; null where it changes nothing. */
export function factorToTake(factor: number | null): string | null {
  if (factor === null) return null
  const value = Math.round(Math.min(20, Math.max(0.05, factor)) * 100) / 100
  return value === 1 ? null : String(value)
}
