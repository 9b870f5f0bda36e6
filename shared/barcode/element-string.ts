import { aiLength, aiSpec } from './application-identifiers.ts'
import { readYymmdd } from './dates.ts'
import { expiryWithTime, lintElement } from './element-lint.ts'
import { isRestrictedCirculation } from './gtin.ts'
import type { ErrorScan, Gs1Attributes, Gs1Scan, ScanIssue } from './scan-result.ts'

/** The separator, FNC1 as decoders hand it over. */
export const groupSeparator = '\u001d'

/** AI and value as they stand in the code, before any check. */
export type RawElement = [ai: string, value: string]

const names: Record<string, string> = {
  '00': 'sscc',
  '02': 'contentGtin',
  '10': 'lot',
  '11': 'production',
  '12': 'due',
  '13': 'packed',
  '15': 'bestBefore',
  '16': 'sellBy',
  '17': 'expiry',
  '21': 'serial',
  '22': 'variant',
  '30': 'count',
  '37': 'contains',
  '240': 'additionalId',
  '241': 'customerPart',
  '414': 'gln',
  '7003': 'expiry',
  '8003': 'returnable',
  '8004': 'asset',
  '8017': 'providerId',
  '8018': 'recipientId',
}
const dates = ['11', '12', '13', '15', '16', '17']
/** What identifies something: with one of these at hand a bad attribute is dropped, without it the scan is refused. */
const keys = ['00', '01', '02', '03', '253', '255', '401', '402', '414', '417', '8003', '8004', '8006', '8010', '8013']
const persons = ['8017', '8018']
/** A wrong check digit here is a misread of the thing itself, never an attribute to drop. */
const hardCheck = ['00', '01', '02', '03', '8006']
/** Never together with an item's own GTIN: they speak of a carton or of a piece. */
const conflicts = ['02', '37', '8006', '03']

/**
 * Cuts an element string into AI and value: predefined lengths by count, the others up to the separator or the end.
 *
 * @returns the elements before the first unknown AI, and that AI's first characters
 */
export function splitElements(text: string): { elements: RawElement[]; unknown: string | null } {
  const elements: RawElement[] = []
  let at = 0
  while (at < text.length) {
    if (text.charAt(at) === groupSeparator) {
      at += 1
      continue
    }
    const ai = text.slice(at, at + aiLength(text.slice(at)))
    const spec = aiSpec(ai)
    if (!spec) return { elements, unknown: ai }
    at += ai.length
    const separator = text.indexOf(groupSeparator, at)
    const end = separator < 0 ? text.length : separator
    const stop = spec.fixed ? Math.min(end, at + spec.parts.reduce((sum, part) => sum + part.max, 0)) : end
    elements.push([ai, text.slice(at, stop)])
    at = stop
  }
  return { elements, unknown: null }
}

interface Checked {
  kept: RawElement[]
  issues: ScanIssue[]
}

/** Checks every value: faults of what identifies are errors, the others become issues. */
function check(elements: RawElement[], today: string): Checked | ErrorScan {
  const kept: RawElement[] = []
  const issues: ScanIssue[] = []
  for (const [ai, value] of elements) {
    const fault = lintElement(ai, value, today)
    if (fault && (ai === '01' || (fault === 'check-digit' && hardCheck.includes(ai)))) {
      return { kind: 'error', error: fault, ai }
    }
    if (fault) {
      issues.push([fault, ai])
      // A wrong length says that the cuts are in doubt: what follows cannot be trusted.
      if (fault === 'ai-length') break
      continue
    }
    const other = kept.find(([known]) => known === ai)
    if (other?.[1] === value) continue
    if (other) return { kind: 'error', error: ai === '01' ? 'two-gtins' : 'ai-repeat', ai }
    kept.push([ai, value])
  }
  return { kept, issues }
}

function attribute(ai: string, value: string, today: string): Gs1Attributes[string] | null {
  if (dates.includes(ai)) return readYymmdd(value, today, true)
  if (ai === '7003') return expiryWithTime(value, today)
  // The leading 0 of a returnable asset is filler; what follows is its own number.
  return value
}

/** A lot or serial at the very end that seems to have swallowed a date: its separator was probably lost on the way. */
function looksSwallowed(element: RawElement | undefined, today: string): boolean {
  if (!element || !['10', '21'].includes(element[0])) return false
  for (const match of element[1].matchAll(/(?=(11|15|17)([0-9]{6}))/g)) {
    if (match.index > 0 && readYymmdd(match[2] ?? '', today, true)) return true
  }
  return false
}

/** Set where the text came as one string without any separator. */
export interface ElementOptions {
  today: string
  noSeparators?: boolean
  unknown?: string | null
}

/**
 * What the elements say: the item, its attributes, and everything that had to be dropped.
 * A wrong check digit of a GTIN or two different GTINs is an error; a bad date, lot or unknown AI beside a good GTIN
 * only loses that attribute. Pairs the dictionary asks for are not enforced: a second symbol read alone is normal.
 */
export function judgeElements(elements: RawElement[], options: ElementOptions): Gs1Scan | ErrorScan {
  const checked = check(elements, options.today)
  if ('kind' in checked) return checked
  const { kept, issues } = checked
  const has = (ai: string): boolean => kept.some(([known]) => known === ai)
  const clash = has('01') ? conflicts.find(has) : undefined
  if (clash) return { kind: 'error', error: 'ai-conflict', ai: clash }
  if (has('21') && has('235')) return { kind: 'error', error: 'ai-conflict', ai: '235' }
  if (options.unknown) issues.push(['ai-unknown', options.unknown])

  const named = kept.some(([ai]) => keys.includes(ai) || persons.includes(ai))
  const first = issues[0]
  if (!named && first) return { kind: 'error', error: first[0], ai: first[1] }
  if (kept.length === 0) return { kind: 'error', error: 'empty' }
  if (has('02') && !has('37')) issues.push(['ai-missing', '37'])

  const value = (ai: string): string | undefined => kept.find(([known]) => known === ai)?.[1]
  const gtin = value('01') ?? value('03') ?? value('8006')?.slice(0, 14) ?? null
  if (gtin && isRestrictedCirculation(gtin)) issues.push(['restricted-circulation', '01'])
  const last = kept.at(-1)
  const swallowed = options.noSeparators === true && looksSwallowed(last, options.today)
  if (swallowed && last) issues.push(['suspect-missing-separator', last[0]])

  const attrs: Gs1Attributes = {}
  for (const [ai, raw] of kept) {
    const name = names[ai]
    if (!name || (swallowed && ai === last?.[0])) continue
    const read = attribute(ai, raw, options.today)
    if (read !== null) attrs[name] = read
  }
  return { kind: 'gs1', gtin, elements: kept, attrs, issues }
}

/** Reads an element string as a decoder hands it over, with GS between variable elements. */
export function readElementString(text: string, today: string): Gs1Scan | ErrorScan {
  let body = text
  while (body.startsWith(groupSeparator)) body = body.slice(1)
  while (body.endsWith(groupSeparator)) body = body.slice(0, -1)
  if (body === '') return { kind: 'error', error: 'empty' }
  const { elements, unknown } = splitElements(body)
  return judgeElements(elements, { today, unknown, noSeparators: !body.includes(groupSeparator) })
}

/**
 * Reads the display form `(01)…(10)…`. Brackets are data in lots, so this is a last resort for engines that give
 * nothing else: an opening bracket starts an AI only when a known AI and a closing bracket follow.
 *
 * @returns null when the text does not begin with a bracketed AI
 */
export function readBracketed(text: string, today: string): Gs1Scan | ErrorScan | null {
  if (!/^\([0-9]{2,4}\)/.test(text)) return null
  const marks = [...text.matchAll(/\(([0-9]{2,4})\)/g)].filter((m) => m.index === 0 || aiSpec(m[1] ?? ''))
  const elements: RawElement[] = []
  for (const [i, mark] of marks.entries()) {
    const ai = mark[1] ?? ''
    if (!aiSpec(ai)) return { kind: 'error', error: 'ai-unknown', ai }
    elements.push([ai, text.slice(mark.index + mark[0].length, marks[i + 1]?.index)])
  }
  return judgeElements(elements, { today })
}
