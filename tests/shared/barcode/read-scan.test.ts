import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hasCheckDigit } from '#shared/barcode/gtin.ts'
import { readScan } from '#shared/barcode/read-scan.ts'

interface Case {
  id: string
  scan: string
  format?: string
  wedgeGs?: string
  expect: Record<string, unknown> & { issues?: [string, string][] }
}
interface Fixture {
  today: string
  ownHosts: string[]
  cases: Case[]
}

const sorted = (result: Record<string, unknown> & { issues?: unknown }): unknown => ({
  ...result,
  ...(Array.isArray(result.issues) ? { issues: result.issues.map(String).sort() } : {}),
})

/** Cases with their sources named inside each file. */
describe.each(['shelf', 'gs1', 'digital-link', 'hibc', 'bad'])('readScan on the %s cases', (name) => {
  const fixture = JSON.parse(
    readFileSync(new URL(`../../fixtures/barcode/${name}.open.json`, import.meta.url), 'utf8'),
  ) as Fixture
  it.each(fixture.cases)('reads $id', ({ scan, format, wedgeGs, expect: expected }) => {
    const result = readScan(scan, { today: fixture.today, ownHosts: fixture.ownHosts, format, wedgeGs })
    expect(sorted({ ...result })).toEqual(sorted(expected))
  })
})

describe('readScan on anything', () => {
  const today = '2026-12-01'
  const piece = fc.constantFrom('01', '10', '17', '\u001d', ']d2', ']C1', '+', '$$', '(01)', 'U', '/', 'https://a/01/')
  const text = fc.array(fc.oneof(fc.string(), piece, fc.stringMatching(/^[0-9]{0,20}$/))).map((parts) => parts.join(''))

  it('never throws and never gives an item with a wrong check digit', () => {
    fc.assert(
      fc.property(text, (scan) => {
        const result = readScan(scan, { today })
        if (result.kind === 'gs1' && result.gtin) expect(hasCheckDigit(result.gtin)).toBe(true)
        expect(JSON.parse(JSON.stringify(result))).toEqual(result)
      }),
      { numRuns: 2_000 },
    )
  })

  it('reads back every element string it can build', () => {
    const lot = fc.stringMatching(/^[A-Za-z0-9.-]{1,20}$/)
    const day = fc.integer({ min: 1, max: 28 }).map((d) => String(d).padStart(2, '0'))
    fc.assert(
      fc.property(lot, lot, day, (batch, serial, dd) => {
        const result = readScan(`]d2010952012345678810${batch}\u001d1728${'02'}${dd}21${serial}`, { today })
        expect(result).toMatchObject({
          kind: 'gs1',
          gtin: '09520123456788',
          attrs: { lot: batch, serial, expiry: { iso: `2028-02-${dd}`, day: true } },
          issues: [],
        })
      }),
    )
  })
})
