import { aiSpec, type AiPart } from './application-identifiers.ts'
import { calendarDay, fullYear, readYymmdd } from './dates.ts'
import { hasCheckDigit } from './gtin.ts'

/** CSET 82: no space, no `# $ @ [ ] ^ { } | ~ \`. CSET 39 (CPID) and base64url for the two AIs that use them. */
const sets = {
  n: /^[0-9]*$/,
  x: /^[!"%&'()*+,\-./0-9:;<=>?A-Z_a-z]*$/,
  y: /^[#\-/0-9A-Z]*$/,
  z: /^[A-Za-z0-9_-]*=*$/,
}

const hour = (text: string): boolean => Number(text) <= 23
const sixtieth = (text: string): boolean => text === '' || Number(text) <= 59

/** Hours, minutes and seconds, each two digits, later ones left out. */
function isTime(text: string): boolean {
  if (text.length % 2 !== 0) return false
  return hour(text.slice(0, 2) || '0') && sixtieth(text.slice(2, 4)) && sixtieth(text.slice(4, 6))
}

/**
 * The pair of check characters of a GMN: prime weights from the right, sum mod 1021 written in base 32.
 * Source: GS1 Syntax Dictionary, `lint_csumalpha.c`.
 */
function hasCheckPair(text: string): boolean {
  const order = '!"%&\'()*+,-./0123456789:;<=>?ABCDEFGHIJKLMNOPQRSTUVWXYZ_abcdefghijklmnopqrstuvwxyz'
  const primes = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53, 59, 61, 67, 71, 73, 79, 83]
  const pair = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ'
  const body = text.slice(0, -2)
  if (body.length < 1 || body.length > primes.length) return false
  let sum = 0
  for (let i = 0; i < body.length; i += 1) {
    const value = order.indexOf(body.charAt(i))
    if (value < 0) return false
    sum += value * (primes[body.length - 1 - i] ?? 0)
  }
  sum %= 1021
  return text.slice(-2) === pair.charAt(sum >> 5) + pair.charAt(sum & 31)
}

function isYyyymmdd(text: string): boolean {
  return calendarDay(Number(text.slice(0, 4)), Number(text.slice(4, 6)), Number(text.slice(6, 8)))?.day === true
}

/** Checks of one component: null when it holds, else the code of the fault. */
function lintPart(lint: string, text: string, today: string): string | null {
  const date = (ok: boolean): string | null => (ok ? null : 'date-invalid')
  const content = (ok: boolean): string | null => (ok ? null : 'ai-content')
  switch (lint) {
    case 'csum':
      return hasCheckDigit(text) ? null : 'check-digit'
    case 'csumalpha':
      return hasCheckPair(text) ? null : 'check-digit'
    case 'yymmd0':
      return date(readYymmdd(text, today, true) !== null)
    case 'yymmdd':
      if (text !== '' && text.length !== 6) return 'ai-length'
      return date(text === '' || readYymmdd(text, today, false) !== null)
    case 'yymmddhh':
    case 'yymmddhhmm':
      return date(readYymmdd(text.slice(0, 6), today, false) !== null && isTime(text.slice(6)))
    case 'yymmd0hhmm':
      // 99 for the hour and the minute says "no time".
      return date(
        readYymmdd(text.slice(0, 6), today, true) !== null && (text.endsWith('9999') || isTime(text.slice(6))),
      )
    case 'yyyymmdd':
    case 'yyyymmddhhmm':
      return date(isYyyymmdd(text.slice(0, 8)) && isTime(text.slice(8)))
    case 'hhmm':
      return text === '' || text.length === 4 ? date(isTime(text)) : 'ai-length'
    case 'mmss':
      if (text.length % 2 !== 0) return 'ai-length'
      return date(sixtieth(text.slice(0, 2)) && sixtieth(text.slice(2, 4)))
    case 'zero':
      return content(text === '0')
    case 'nozero':
      return content(!text.startsWith('0'))
    case 'yesno':
      return content(text === '0' || text === '1')
    case 'minus':
      return content(text === '' || text === '-')
    case 'threes':
      return text.length % 3 === 0 ? null : 'ai-length'
    case 'piece':
      return content(text.slice(0, 2) > '00' && text.slice(2) > '00' && text.slice(0, 2) <= text.slice(2))
    default:
      throw new RangeError(`no such check: ${lint}`)
  }
}

/** Cuts a value into its components, each as long as it may be; null when the lengths do not fit. */
function cut(parts: AiPart[], value: string): string[] | null {
  const pieces: string[] = []
  let at = 0
  for (const part of parts) {
    const piece = value.slice(at, at + part.max)
    if (piece.length < part.min) return null
    pieces.push(piece)
    at += piece.length
  }
  return at === value.length ? pieces : null
}

/**
 * Checks a value against its AI: lengths first, then characters, then check digits and dates.
 *
 * @param ai an AI of the table
 * @returns null when it holds, else `ai-length`, `ai-charset`, `check-digit`, `date-invalid` or `ai-content`
 */
export function lintElement(ai: string, value: string, today: string): string | null {
  const parts = aiSpec(ai)?.parts
  if (!parts) return 'ai-unknown'
  const pieces = cut(parts, value)
  if (!pieces) return 'ai-length'
  for (const [i, part] of parts.entries()) {
    const piece = pieces[i] ?? ''
    if (!sets[part.set].test(piece)) return 'ai-charset'
    for (const lint of part.lint) {
      const fault = lintPart(lint, piece, today)
      if (fault) return fault
    }
  }
  return null
}

/** The date and time of (7003), YYMMDDHHMM, once it has passed its check. */
export function expiryWithTime(value: string, today: string): { raw: string; iso: string; day: true; time: string } {
  const raw = value.slice(0, 6)
  const year = fullYear(Number(raw.slice(0, 2)), today)
  return {
    raw,
    iso: `${year}-${raw.slice(2, 4)}-${raw.slice(4, 6)}`,
    day: true,
    time: `${value.slice(6, 8)}:${value.slice(8, 10)}`,
  }
}
