import { DateTime } from 'luxon'

/** The first moment of a local day, as an instant in UTC. @example startOfDay('2026-06-01', 'Europe/London') */
export const startOfDay = (date: string, zone: string): string =>
  DateTime.fromISO(date, { zone }).startOf('day').toUTC().toISO({ precision: 'milliseconds' }) as string
