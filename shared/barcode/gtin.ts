/**
 * True when the last digit is the mod 10 check digit of the digits before it (GTIN, SSCC, GLN …).
 * Weights 3, 1, 3, 1 … from the digit left of the check digit. Source: GS1 Syntax Engine, `ai.c`.
 *
 * @example hasCheckDigit('09520123456788') // => true
 */
export function hasCheckDigit(digits: string): boolean {
  if (!/^[0-9]{2,}$/.test(digits)) return false
  let sum = 0
  for (let i = digits.length - 2, weight = 3; i >= 0; i -= 1, weight = 4 - weight) sum += Number(digits[i]) * weight
  return (10 - (sum % 10)) % 10 === Number(digits.at(-1))
}

/**
 * GTIN-8, -12, -13 and -14 are one number space of 14 digits, padded with 0. The first digit of 14 is a packing level
 * and is never stripped: a case and an each are different GTINs.
 *
 * @returns 14 digits, or null when the length is none of 8, 12, 13, 14 or the check digit is wrong
 * @example toGtin14('4012345678901') // => '04012345678901'
 */
export function toGtin14(digits: string): string | null {
  if (!/^([0-9]{8}|[0-9]{12,14})$/.test(digits) || !hasCheckDigit(digits)) return null
  return digits.padStart(14, '0')
}

/**
 * Expands the 8 digits of a UPC-E symbol (number system 0 or 1) to the 12 of UPC-A, check digit kept.
 *
 * @returns 12 digits, or null when it is no UPC-E text; the check digit is not looked at
 * @example expandUpcE('04252614') // => '042100005264'
 */
export function expandUpcE(digits: string): string | null {
  const match = /^([01])([0-9]{6})([0-9])$/.exec(digits)
  if (!match) return null
  const [, system = '', middle = '', check = ''] = match
  const last = middle.charAt(5)
  const body =
    last <= '2'
      ? middle.slice(0, 2) + last + '0000' + middle.slice(2, 5)
      : last === '3'
        ? middle.slice(0, 3) + '00000' + middle.slice(3, 5)
        : last === '4'
          ? middle.slice(0, 4) + '00000' + middle.charAt(4)
          : middle.slice(0, 5) + '0000' + last
  return system + body + check
}

/**
 * Prefixes 02, 04 and 20–29 are unique inside one company or country only. The prefix is that of the 13-digit form;
 * higher packing levels (first digit 1–9) and GTIN-8 are never in these ranges.
 * @param gtin 14 digits
 */
export function isRestrictedCirculation(gtin: string): boolean {
  return /^0(02|04|2[0-9])/.test(gtin)
}
