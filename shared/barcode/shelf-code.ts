/**
 * The code printed on a shelf label: `U`, six characters of a base-32 alphabet, one check character.
 *
 * `U` is not in the alphabet, so the first letter alone says "ours": such a text cannot be a GTIN, an element string,
 * a HIBC code or an address. The code says nothing about room, item or hospital, so a label survives moves.
 */

/** Digits and capitals without I, L, O and U; a character's value is its position. */
const alphabet = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'

/** Weights of d1…d6; all differ, none is 0 or 1, so one wrong character and any swap of two change the sum. */
const weights = [2, 4, 8, 16, 5, 10]

/** Product in GF(32) with the polynomial x^5 + x^2 + 1. */
function multiply(a: number, b: number): number {
  let product = 0
  let shifted = a
  for (let bits = b; bits > 0; bits >>= 1) {
    if (bits & 1) product ^= shifted
    shifted <<= 1
    if (shifted & 32) shifted ^= 0b100101
  }
  return product
}

/**
 * Check character of six characters of the alphabet: the sum of weight × value, both in GF(32).
 * It catches every single wrong character, every swap of two and every twin error.
 *
 * @returns one character, or null when `body` is not six characters of the alphabet
 * @example shelfCheckCharacter('7K2M4Q') // => '9'
 */
export function shelfCheckCharacter(body: string): string | null {
  if (body.length !== weights.length) return null
  let sum = 0
  for (const [i, weight] of weights.entries()) {
    const value = alphabet.indexOf(body.charAt(i))
    if (value < 0) return null
    sum ^= multiply(weight, value)
  }
  return alphabet.charAt(sum)
}

/**
 * The code as people read it, with a hyphen in the middle.
 * @example formatShelfCode('U7K2M4Q9') // => 'U7K2-M4Q9'
 */
export function formatShelfCode(code: string): string {
  return `${code.slice(0, 4)}-${code.slice(4)}`
}

/**
 * What a person or scanner wrote, folded to the alphabet: capitals, no spaces or hyphens, O as 0, I and L as 1.
 * @example foldShelfCode('u1o0-liqn') // => 'U10011QN'
 */
export function foldShelfCode(text: string): string {
  return text
    .replace(/[\s\u2010-\u2015-]/g, '')
    .toUpperCase()
    .replace(/O/g, '0')
    .replace(/[IL]/g, '1')
}

/** `not-shelf`: has not the form of our code. `check-char`: has the form, but was misread or mistyped. */
export type ShelfCodeReading =
  { ok: true; code: string; display: string } | { ok: false; reason: 'not-shelf' | 'check-char' }

/**
 * Reads a shelf code in any carrier or as typed.
 * @example parseShelfCode('u7k2 m4q9') // => { ok: true, code: 'U7K2M4Q9', display: 'U7K2-M4Q9' }
 */
export function parseShelfCode(text: string): ShelfCodeReading {
  const code = foldShelfCode(text)
  if (!/^U[0-9A-Z]{7}$/.test(code)) return { ok: false, reason: 'not-shelf' }
  const check = shelfCheckCharacter(code.slice(1, 7))
  if (check === null || check !== code.charAt(7)) return { ok: false, reason: 'check-char' }
  return { ok: true, code, display: formatShelfCode(code) }
}

/** Words that nobody should read on a ward shelf, in the spelling the alphabet allows (0 as O, 1 as I or L). */
const unlucky =
  'DEAD DEATH D1E DYE K1LL SEX RAPE FAT HATE CRAP FART ASS ARSE WANK P1SS SH1T T1T KKK SAD BAD HE11'.split(' ')

/**
 * Makes a new code from random bytes. Codes are drawn at random, never in sequence and never used twice: the caller
 * checks that it is free and draws again when it is not.
 *
 * @param drawBytes gives that many random bytes, from a cryptographic source or a seeded one
 * @throws {RangeError} when the source keeps giving codes that may not be issued (it is not random)
 * @returns eight characters, beginning with `U`
 */
export function makeShelfCode(drawBytes: (count: number) => Uint8Array): string {
  for (let attempt = 0; attempt < 100; attempt += 1) {
    // 256 is a multiple of 32, so the low five bits of each byte are evenly spread.
    const body = Array.from(drawBytes(weights.length), (byte) => alphabet.charAt(byte & 31)).join('')
    const check = shelfCheckCharacter(body)
    if (check === null || body === '000000') continue
    const code = `U${body}${check}`
    if (!unlucky.some((word) => code.includes(word))) return code
  }
  throw new RangeError('the random source keeps giving codes that may not be issued')
}
