import { readDigitalLink } from './digital-link.ts'
import { groupSeparator, judgeElements, readBracketed, readElementString } from './element-string.ts'
import { expandUpcE, hasCheckDigit, toGtin14 } from './gtin.ts'
import { readHibc } from './hibc.ts'
import type { ReadScanOptions, ScanResult } from './scan-result.ts'
import { parseShelfCode } from './shelf-code.ts'

const longest = 512
/** AIM identifiers of carriers that hold element strings. */
const elementCarriers = [']C1', ']e0', ']d2', ']Q3', ']J1']
const retailLengths: Record<string, number[]> = { ean13: [13], ean8: [8], upca: [12, 13], upce: [8, 12] }

const item = (gtin: string, today: string): ScanResult => judgeElements([['01', gtin]], { today })

/** Digits of a retail symbol, whose kind the engine or the AIM identifier gives. */
function readRetail(digits: string, format: string, today: string): ScanResult {
  if (digits === '') return { kind: 'error', error: 'empty' }
  if (!retailLengths[format]?.includes(digits.length)) return { kind: 'error', error: 'ai-length', ai: '01' }
  if (!/^[0-9]+$/.test(digits)) return { kind: 'error', error: 'ai-charset', ai: '01' }
  const full = format === 'upce' && digits.length === 8 ? expandUpcE(digits) : digits
  const gtin = full && toGtin14(full)
  return gtin ? item(gtin, today) : { kind: 'error', error: 'check-digit', ai: '01' }
}

/** Our own label with the hospital's address around the code; only hosts of the allow list. */
function readOwnAddress(text: string, ownHosts: readonly string[]): ScanResult | null {
  const match = /^https?:\/\/([^/?#]+)\/B\/([^/?#]+)$/i.exec(text)
  const host = match?.[1]?.toLowerCase()
  if (!host || !ownHosts.some((own) => own.toLowerCase() === host)) return null
  const reading = parseShelfCode(match?.[2] ?? '')
  if (reading.ok) return { kind: 'shelf', code: reading.code, display: reading.display }
  return reading.reason === 'check-char' ? { kind: 'error', error: 'check-char' } : { kind: 'text', text }
}

/** Digits that pass for an element string without any mark: a key in front whose own check digit holds. */
function looksLikeElements(text: string): boolean {
  const match = /^(?:0[12]([0-9]{14})|00([0-9]{18}))/.exec(text)
  return match !== null && hasCheckDigit(match[1] ?? match[2] ?? '')
}

function readDigits(digits: string, today: string): ScanResult | null {
  const gtin = toGtin14(digits)
  if (!gtin) return null
  const result = item(gtin, today)
  const upcE = digits.length === 8 ? expandUpcE(digits) : null
  // Without its symbology an 8-digit text may be either; the reader is told.
  if (result.kind === 'gs1' && upcE && hasCheckDigit(upcE)) result.issues.push(['ean8-or-upce', '01'])
  return result
}

function readUnmarked(text: string, options: ReadScanOptions): ScanResult {
  const { today } = options
  const shelf = parseShelfCode(text)
  if (shelf.ok) return { kind: 'shelf', code: shelf.code, display: shelf.display }
  if (shelf.reason === 'check-char') return { kind: 'error', error: 'check-char' }
  if (text.startsWith(groupSeparator) || looksLikeElements(text)) return readElementString(text, today)
  return (
    readHibc(text, today) ??
    readOwnAddress(text, options.ownHosts ?? []) ??
    readDigitalLink(text, today) ??
    readBracketed(text, today) ??
    readDigits(text, today) ?? { kind: 'text', text }
  )
}

/**
 * What a scan means: our shelf code, a GS1 code (item and attributes), a HIBC code, unknown text, or a misread.
 * Never throws, never opens an address, never returns a GTIN with a wrong check digit.
 *
 * @param scan exactly what the engine, scanner or person handed over
 * @example readScan('U7K2M4Q9', { today: '2026-12-01' }) // => { kind: 'shelf', code: 'U7K2M4Q9', display: 'U7K2-M4Q9' }
 */
export function readScan(scan: string, options: ReadScanOptions): ScanResult {
  const { today, wedgeGs } = options
  let text = scan.replace(/^[\r\n\t\uFEFF]+|[\r\n\t\uFEFF]+$/g, '')
  if (text.length > longest) return { kind: 'error', error: 'too-long' }
  if (text === '') return { kind: 'error', error: 'empty' }
  if (wedgeGs) text = text.replaceAll(wedgeGs, groupSeparator)

  const aim = /^\][A-Za-z][0-9A-Za-z]/.exec(text)?.[0]
  if (aim) {
    const rest = text.slice(aim.length)
    if (elementCarriers.includes(aim)) return readElementString(rest, today)
    if (aim === ']E0') return readRetail(rest, 'ean13', today)
    if (aim === ']E4') return readRetail(rest, 'ean8', today)
    return rest === '' ? { kind: 'error', error: 'empty' } : readUnmarked(rest, options)
  }
  const format = (options.format ?? '').toLowerCase().replace(/[_-]/g, '')
  if (Object.hasOwn(retailLengths, format)) return readRetail(text, format, today)
  return readUnmarked(text, options)
}
