/** Declares one field of a plain record form. The form renders it, converts it and shows its error. */
export interface RecordField {
  name: string
  label: string
  hint?: string
  suffix?: string
  type:
    | 'text'
    | 'multiline'
    | 'email'
    | 'password'
    | 'time'
    | 'whole'
    | 'decimal'
    | 'choice'
    | 'check'
    | 'days'
    | 'pick'
    | 'picks'
    | 'rooms'
    | 'gtins'
  /** Choices of a short list. */
  options?: readonly { value: string; label: string }[]
  /** Where a long list comes from. */
  source?: PickSource
  /** Empty means null instead of a missing value. */
  nullable?: boolean
  /** What an empty pick means; it is then a short list with this as its first choice. */
  empty?: string
  /** May be left empty: the server then chooses. */
  optional?: boolean
  /** What a new record starts with. */
  start?: string
  /** Shown only for a new record, or only for an existing one. */
  only?: 'new' | 'existing'
  /** Half the width on desktop. */
  half?: boolean
  autocomplete?: string
}
export type PickSource = 'wards' | 'rooms' | 'items' | 'suppliers' | 'bins' | 'calendars'

export interface Gtin {
  gtin: string
  level: 'each' | 'pack'
}
export type FieldValue = string | boolean | string[] | Gtin[] | null
export type FormValues = Record<string, FieldValue>

/** A value as the form holds it: numbers as typed text, so that nothing typed is lost. */
export function toForm(field: RecordField, value: unknown): FieldValue {
  if (field.type === 'check') return value === true
  if (field.type === 'gtins') return Array.isArray(value) ? (value as Gtin[]).map((g) => ({ ...g })) : []
  if (field.type === 'picks') return Array.isArray(value) ? [...(value as string[])] : []
  if (field.type === 'rooms') return value === null ? null : Array.isArray(value) ? [...(value as string[])] : []
  if (field.type === 'choice')
    return typeof value === 'string' ? value : (field.start ?? field.options?.[0]?.value ?? '')
  if (value === undefined) return field.start ?? ''
  return value === null ? '' : String(value)
}

export interface Converted {
  body: Record<string, unknown>
  errors: Record<string, string>
}

const isNumber = (type: RecordField['type']): boolean => type === 'whole' || type === 'decimal'

/**
 * The request body of a form. Numbers are read from text here, because only the form knows what was typed, and what has
 * to be filled in is said here; everything else is judged by the server. An empty password, code or optional number of a
 * new record is left out.
 */
export function toBody(
  fields: readonly RecordField[],
  values: FormValues,
  words: { number: string; needed: string },
): Converted {
  const body: Record<string, unknown> = {}
  const errors: Record<string, string> = {}
  for (const field of fields) {
    const value = values[field.name]
    if (isNumber(field.type)) {
      const typed = String(value ?? '')
        .trim()
        .replace(',', '.')
      if (typed === '') {
        if (field.nullable) body[field.name] = null
        else if (!field.optional) errors[field.name] = words.needed
      } else if (!/^-?[0-9]+(\.[0-9]+)?$/.test(typed)) errors[field.name] = words.number
      else body[field.name] = Number(typed)
    } else if (field.type === 'pick') {
      if (value !== '') body[field.name] = value
      else if (field.nullable) body[field.name] = null
      else errors[field.name] = words.needed
    } else if ((field.type === 'password' || field.name === 'code') && value === '') {
      body[field.name] = field.type === 'password' || field.only === 'new' ? undefined : ''
    } else body[field.name] = value
  }
  return { body, errors }
}

/** Only what differs from the record as it was read, so that two people changing different fields do not collide. */
export function changedOnly(body: Record<string, unknown>, before: Record<string, unknown>): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(body).filter(
      ([name, value]) => value !== undefined && JSON.stringify(value) !== JSON.stringify(before[name]),
    ),
  )
}
