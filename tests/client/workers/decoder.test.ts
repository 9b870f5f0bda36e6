// @vitest-environment node
import { BitArray, Code128Reader, NotFoundException } from '@zxing/library'
import bwipjs from 'bwip-js/node'
import { describe, expect, it } from 'vitest'
import { readScan } from '#shared/barcode/read-scan.ts'
import { repairCode128 } from '#src/workers/code128-repair.ts'
import { makeDecoder } from '#src/workers/decoder.ts'
import { modulesOf, paint } from '#tests/support/barcode-pixels.ts'

/** Widths of bars and spaces of a linear symbol, as a row of pixels with dark bars and a quiet zone before it. */
function rowOf(bcid: string, text: string, darkBars: number): BitArray {
  const [raw] = bwipjs.raw({ bcid, text }) as unknown as [{ sbs: number[] }]
  const pixels: boolean[] = []
  const push = (dark: boolean, count: number) => pixels.push(...Array<boolean>(count).fill(dark))
  push(false, 8)
  for (let i = 0; i < darkBars; i += 1) {
    push(true, 4)
    push(false, 5)
  }
  push(false, 40)
  raw.sbs.forEach((width, i) => push(i % 2 === 0, width * 3))
  push(false, 40)
  const row = new BitArray(pixels.length)
  pixels.forEach((dark, i) => dark && row.set(i))
  return row
}
/** As the library ships it, taken before anything mends it. */
const parts = Code128Reader as unknown as { findStartPattern: unknown }
const asShipped = parts.findStartPattern
const read = (row: BitArray): string => new Code128Reader().decodeRow(0, row, undefined).getText()
const label = '(01)09520123456788(17)271231(10)ABC123'

describe('the search for the start of a Code 128', () => {
  it('fails in the library with ten dark bars to the left, and reads with the repair', () => {
    parts.findStartPattern = asShipped
    expect(read(rowOf('gs1-128', label, 0))).toContain('09520123456788')
    expect(() => read(rowOf('gs1-128', label, 10))).toThrow(NotFoundException)
    repairCode128()
    for (const bars of [0, 1, 2, 3, 10]) {
      expect(read(rowOf('gs1-128', label, bars))).toContain('0952012345678817271231')
      expect(read(rowOf('code128', 'U7K2M4Q9', bars))).toBe('U7K2M4Q9')
    }
  })

  it('still says so when there is no code', () => {
    repairCode128()
    expect(() => read(new BitArray(200))).toThrow(NotFoundException)
  })
})

describe('decoder', () => {
  const decode = makeDecoder()
  const see = (symbology: string, text: string, hard = false) => {
    const { grey, width, height } = paint(modulesOf(symbology, text), { width: 1024, height: 432, module: 4 })
    return decode(grey, width, height, hard)
  }

  it.each([
    ['qrcode', 'U7K2M4Q9', 'qrcode'],
    ['datamatrix', 'U7K2M4Q9', 'datamatrix'],
    ['code128', 'U7K2M4Q9', 'code128'],
    ['ean13', '4012345678901', 'ean13'],
    ['code39', '+A999123457', 'code39'],
  ])('reads a %s', (symbology, text, format) => {
    expect(see(symbology, text, true)).toEqual({ text, format })
  })

  it('keeps the separators of GS1 codes, so that the item is read', () => {
    for (const symbology of ['gs1-128', 'gs1datamatrix']) {
      const found = see(symbology, '(01)09520123456788(10)ABC(17)271231', true)
      expect(readScan(found?.text ?? '', { today: '2026-12-01', format: found?.format })).toMatchObject({
        kind: 'gs1',
        gtin: '09520123456788',
        attrs: { lot: 'ABC', expiry: { iso: '2027-12-31' } },
        issues: [],
      })
    }
  })

  it('gives nothing old for an empty frame after a code', () => {
    expect(see('qrcode', 'U7K2M4Q9')).not.toBeNull()
    expect(decode(new Uint8ClampedArray(640 * 300).fill(230), 640, 300, true)).toBeNull()
  })
})
