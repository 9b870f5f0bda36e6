import { calendarDay, dayOfYear, fullYear } from './dates.ts'
import type { ErrorScan, HibcScan, ScanDate } from './scan-result.ts'

const alphabet = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ-. $/+%'
const structure: ErrorScan = { kind: 'error', error: 'hibc-structure' }

/**
 * Check character of HIBC: sum of the values of all characters, mod 43. Source: ANSI/HIBC 2.6 (as carried by BWIPP).
 * @returns null when a character is outside the 43
 */
export function hibcCheckCharacter(text: string): string | null {
  let sum = 0
  for (const character of text) {
    const value = alphabet.indexOf(character)
    if (value < 0) return null
    sum += value
  }
  return alphabet.charAt(sum % 43)
}

const number = (text: string): number => Number(text)

/** The date forms, by their leading digit; `text` is what follows it. Length in digits and how to read them. */
const dateForms: Record<
  string,
  { length: number; read: (text: string, today: string) => Omit<ScanDate, 'raw'> | null }
> = {
  '2': {
    length: 6,
    read: (t, today) =>
      calendarDay(fullYear(number(t.slice(4, 6)), today), number(t.slice(0, 2)), number(t.slice(2, 4)) || -1),
  },
  '3': { length: 6, read: yymmdd },
  '4': { length: 8, read: (t, today) => withHour(yymmdd(t, today), t.slice(6, 8)) },
  '5': { length: 5, read: yyjjj },
  '6': { length: 7, read: (t, today) => withHour(yyjjj(t, today), t.slice(5, 7)) },
}

function yymmdd(t: string, today: string): Omit<ScanDate, 'raw'> | null {
  return calendarDay(fullYear(number(t.slice(0, 2)), today), number(t.slice(2, 4)), number(t.slice(4, 6)) || -1)
}

function yyjjj(t: string, today: string): Omit<ScanDate, 'raw'> | null {
  return dayOfYear(fullYear(number(t.slice(0, 2)), today), number(t.slice(2, 5)))
}

function withHour(date: Omit<ScanDate, 'raw'> | null, hour: string): Omit<ScanDate, 'raw'> | null {
  return date && number(hour) <= 23 ? { ...date, time: `${hour}:00` } : null
}

function setDate(scan: HibcScan, field: 'expiry' | 'production', date: Omit<ScanDate, 'raw'> | null): void {
  if (date) scan[field] = date as ScanDate
  else scan.issues.push(['date-invalid', field])
}

/** `$$`[`+`][quantity]{date}lot-or-serial, after the `$$`. False when the structure does not hold. */
function readDated(text: string, scan: HibcScan, today: string): boolean {
  const field = text.startsWith('+') ? 'serial' : 'lot'
  let rest = field === 'serial' ? text.slice(1) : text
  const quantity = /^(?:8([0-9]{2})|9([0-9]{5}))/.exec(rest)
  if (quantity) {
    scan.quantity = number(quantity[1] ?? quantity[2] ?? '')
    rest = rest.slice(quantity[0].length)
    if (rest === '') return true
  }
  const form = rest.charAt(0)
  if (form === '7') return finish(rest.slice(1), scan, field)
  if (form === '0' || form === '1') {
    if (!/^[0-9]{4}/.test(rest)) return false
    setDate(scan, 'expiry', calendarDay(fullYear(number(rest.slice(2, 4)), today), number(rest.slice(0, 2)), 0))
    return finish(rest.slice(4), scan, field)
  }
  const known = dateForms[form]
  const digits = rest.slice(1, 1 + (known?.length ?? 0))
  if (!known || digits.length < known.length || !/^[0-9]+$/.test(digits)) return false
  setDate(scan, 'expiry', known.read(digits, today))
  return finish(rest.slice(1 + known.length), scan, field)
}

function finish(text: string, scan: HibcScan, field: 'lot' | 'serial'): boolean {
  if (text.length > 18) return false
  if (text !== '') scan[field] = text
  return true
}

function readSecondary(text: string, scan: HibcScan, today: string): boolean {
  if (text.startsWith('$$')) return readDated(text.slice(2), scan, today)
  if (text.startsWith('$+')) return text.length > 2 && finish(text.slice(2), scan, 'serial')
  if (text.startsWith('$')) return text.length > 1 && finish(text.slice(1), scan, 'lot')
  if (!/^[0-9]{5}/.test(text)) return false
  setDate(scan, 'expiry', yyjjj(text.slice(0, 5), today))
  return finish(text.slice(5), scan, 'lot')
}

/** `/14D…` expiry, `/16D…` manufacture, `/S…` serial, `/Q…` quantity, after a combined code's secondary part. */
function readSupplement(text: string, scan: HibcScan): boolean {
  const date = /^(14|16)D([0-9]{4})([0-9]{2})([0-9]{2})$/.exec(text)
  if (date) {
    const day = calendarDay(number(date[2] ?? ''), number(date[3] ?? ''), number(date[4] ?? '') || -1)
    setDate(scan, date[1] === '14' ? 'expiry' : 'production', day)
    return true
  }
  if (/^Q[0-9]{1,5}$/.test(text)) scan.quantity = number(text.slice(1))
  else if (/^S.{1,18}$/.test(text)) scan.serial = text.slice(1)
  else return false
  return true
}

/**
 * Reads a HIBC code: primary (labeler, product, unit of measure), secondary (lot or serial, date, quantity), or both.
 * Mod 43 is a plain sum and misses most neighbour swaps, so the scanner asks for two equal reads before it counts.
 *
 * @param text without AIM identifier; spaces are data and must not be trimmed
 * @returns null when it is no HIBC text at all
 */
export function readHibc(text: string, today: string): HibcScan | ErrorScan | null {
  const bare = /^\*(\+.*)\*$/s.exec(text)?.[1] ?? text
  if (!/^\+([A-Z][A-Z0-9]{3}|\$|[0-9]{5})/.test(bare)) return null
  const body = bare.slice(0, -1)
  const check = hibcCheckCharacter(body)
  if (check === null || !alphabet.includes(bare.slice(-1))) return null
  if (check !== bare.slice(-1)) return { kind: 'error', error: 'check-char' }

  if (/^\+[$0-9]/.test(body)) {
    const scan: HibcScan = { kind: 'hibc', part: 'secondary', link: body.slice(-1), issues: [] }
    return readSecondary(body.slice(1, -1), scan, today) ? scan : structure
  }
  const [primary = '', secondary, ...supplements] = body.split('/')
  const match = /^\+([A-Z][A-Z0-9]{3})([A-Z0-9]{1,18})([0-9])$/.exec(primary)
  if (!match) return structure
  const scan: HibcScan = {
    kind: 'hibc',
    part: secondary === undefined ? 'primary' : 'combined',
    lic: match[1] ?? '',
    pcn: match[2] ?? '',
    uom: number(match[3] ?? ''),
    issues: [],
  }
  if (secondary === undefined) return scan
  if (!readSecondary(secondary, scan, today) && !readSupplement(secondary, scan)) return structure
  return supplements.every((part) => readSupplement(part, scan)) ? scan : structure
}
