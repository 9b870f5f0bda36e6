import { aiSpec } from './application-identifiers.ts'
import { judgeElements, type RawElement } from './element-string.ts'
import { toGtin14 } from './gtin.ts'
import type { ErrorScan, Gs1Scan } from './scan-result.ts'

/** Qualifiers of each key, in the order they must keep; alternatives exclude each other. */
const qualifiers: Record<string, string[][]> = {
  '00': [[]],
  '01': [['22', '10', '21'], ['235']],
  '253': [[]],
  '255': [[]],
  '401': [[]],
  '402': [[]],
  '414': [['254'], ['7040']],
  '417': [['7040']],
  '8003': [[]],
  '8004': [['7040']],
  '8006': [['22', '10', '21']],
  '8010': [['8011']],
  '8013': [[]],
  '8017': [['8019']],
  '8018': [['8019']],
}

/** True when `ais` is a sequence with left-out members but no other order. */
function inOrder(ais: string[], sequence: string[]): boolean {
  let at = -1
  return ais.every((ai) => {
    const next = sequence.indexOf(ai)
    const ok = next > at
    at = next
    return ok
  })
}

function decode(text: string, plusIsSpace: boolean): string | null {
  // Only characters an address may hold; a bad escape or a zero byte is refused, not guessed.
  if (!/^[!-~]*$/.test(text) || /[<>"\\^`{|}]/.test(text)) return null
  try {
    const decoded = decodeURIComponent(plusIsSpace ? text.replace(/\+/g, ' ') : text)
    return decoded.includes('\u0000') ? null : decoded
  } catch {
    return null
  }
}

const refuse = (error: string, ai?: string): ErrorScan => ({ kind: 'error', error, ...(ai ? { ai } : {}) })

/** The query: data attributes by number; other names belong to the link and are passed over. */
function readQuery(query: string, key: string, path: string[]): RawElement[] | ErrorScan {
  const found: RawElement[] = []
  const seen = [key, ...path]
  for (const pair of query.split('&')) {
    const [ai = '', ...rest] = pair.split('=')
    if (!/^[0-9]+$/.test(ai)) continue
    const value = decode(rest.join('='), true)
    if (value === null) return refuse('dl-escape')
    const spec = aiSpec(ai)
    if (!spec) return refuse('ai-unknown', ai)
    if (seen.includes(ai)) return refuse('ai-repeat', ai)
    // What could have stood in the path beside the qualifiers given must stand there.
    const couldBePath = qualifiers[key]?.some(
      (order) => order.includes(ai) && path.every((known) => order.includes(known)),
    )
    if (!spec.attribute || couldBePath) return refuse('dl-attribute', ai)
    seen.push(ai)
    found.push([ai, value])
  }
  return found
}

/**
 * Reads a GS1 Digital Link without ever opening it: `…/{key}/{value}[/{qualifier}/{value}…][?AI=value]`.
 * The key is the right-most primary key. Sources: GS1 Syntax Engine, `dl.c`; barcode grammar of the same.
 *
 * @returns null when the address is no Digital Link at all (then it is plain text)
 */
export function readDigitalLink(text: string, today: string): Gs1Scan | ErrorScan | null {
  const match = /^(?:https?|HTTPS?):\/\/([A-Za-z0-9.:_~[\]@!$&'()*+,;=%-]+)\/([^?#]*)(?:\?([^#]*))?(?:#.*)?$/s.exec(
    text,
  )
  if (!match) return null
  const segments = (match[2] ?? '').split('/')
  // Keys stand an even number of segments before the end, so that every one after them has a value.
  let start = segments.length - 2
  while (start >= 0 && !Object.hasOwn(qualifiers, segments[start] ?? '')) start -= 2
  const key = segments[start]
  const raw = segments[start + 1]
  if (start < 0 || !key || !raw) return null

  const keyValue = decode(raw, false)
  if (keyValue === null) return refuse('dl-escape')
  const elements: RawElement[] = []
  const path: string[] = []
  for (let i = start + 2; i < segments.length; i += 2) {
    const value = decode(segments[i + 1] ?? '', false)
    if (value === null) return refuse('dl-escape')
    path.push(segments[i] ?? '')
    elements.push([segments[i] ?? '', value])
  }
  if (!qualifiers[key]?.some((order) => inOrder(path, order))) return refuse('dl-order')
  const query = match[3] === undefined ? [] : readQuery(match[3], key, path)
  if (!Array.isArray(query)) return query

  // 8, 12 and 13 digits occur in old links; they count when the check digit holds.
  const padded = key === '01' && keyValue.length < 14 ? toGtin14(keyValue) : null
  const result = judgeElements([[key, padded ?? keyValue], ...elements, ...query], { today })
  if (result.kind === 'error') return result
  return { ...result, issues: padded ? [['gtin-not-14', '01'], ...result.issues] : result.issues, link: text }
}
