import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { makeShelfCode, parseShelfCode, shelfCheckCharacter } from '#shared/barcode/shelf-code.ts'

const alphabet = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'
const body = fc.array(fc.constantFrom(...alphabet), { minLength: 6, maxLength: 6 }).map((c) => c.join(''))
const label = body.map((b) => `U${b}${shelfCheckCharacter(b)}`)

describe('shelf code', () => {
  it.each([
    ['7K2M4Q', '9'],
    ['000001', 'A'],
    ['ZZZZZZ', 'S'],
  ])('gives %s the check character %s', (text, check) => {
    expect(shelfCheckCharacter(text)).toBe(check)
  })

  it('reads every code as printed, typed small, with spaces and with confusable letters', () => {
    fc.assert(
      fc.property(label, (code) => {
        const typed = code.toLowerCase().replace(/0/g, 'o').replace(/1/g, 'l')
        expect(parseShelfCode(`${typed.slice(0, 4)} -${typed.slice(4)}`)).toMatchObject({ ok: true, code })
      }),
    )
  })

  it('tells every single wrong character and every swap', () => {
    fc.assert(
      fc.property(
        label,
        fc.integer({ min: 1, max: 7 }),
        fc.integer({ min: 1, max: 7 }),
        fc.constantFrom(...alphabet),
        (code, i, j, wrong) => {
          const one = code.slice(0, i) + wrong + code.slice(i + 1)
          if (one !== code) expect(parseShelfCode(one)).toEqual({ ok: false, reason: 'check-char' })
          const letters = [...code]
          letters[i] = code.charAt(j)
          letters[j] = code.charAt(i)
          const swapped = letters.join('')
          if (swapped !== code) expect(parseShelfCode(swapped)).toEqual({ ok: false, reason: 'check-char' })
        },
      ),
    )
  })

  it('makes codes that read back, skipping 000000 and unlucky words', () => {
    let n = 0
    const draw = (count: number): Uint8Array => createHash('sha256').update(String(n++)).digest().subarray(0, count)
    for (let i = 0; i < 500; i += 1) expect(parseShelfCode(makeShelfCode(draw)).ok).toBe(true)

    const queue = [new Uint8Array(6), Uint8Array.from([13, 14, 10, 13, 1, 2]), Uint8Array.from([7, 19, 2, 20, 4, 23])]
    expect(makeShelfCode(() => queue.shift() ?? new Uint8Array(6))).toBe('U7K2M4Q9')
    expect(() => makeShelfCode(() => new Uint8Array(6))).toThrow(RangeError)
  })
})
