import { hasCheckDigit } from '#shared/barcode/gtin.ts'
import { access } from './items-access.ts'
import { airway } from './items-airway.ts'
import { care } from './items-care.ts'
import { infusion } from './items-infusion.ts'
import { units, type ItemRow, type Shape } from './item-row.ts'
import { wound } from './items-wound.ts'

export interface DemoUse {
  roomKey: string
  meanPerDay: number
  shape: Shape
}

export interface DemoItem {
  code: string
  name: string
  orderName: string
  unitOfUse: string
  unitCode: string
  countUnit: string
  countNote: string
  ved: 'V' | 'E' | 'D'
  category: string
  shelfLifeDays: number | null
  minShelfDays: number | null
  latex: boolean
  coldChain: boolean
  supplier: ItemRow[6]
  supplierItem: string
  price: number
  orderUnit: string
  unitsPerOrder: number
  gtins: { gtin: string; level: 'each' | 'pack' }[]
  uses: DemoUse[]
}

const shapes: Record<string, Shape> = { p: 'steady', n: 'bursty', l: 'lumpy', w: 'weekday', s: 'stopped' }
const latex = new Set(['UR-016', 'GL-012', 'BA-010'])

/** Names or looks that are easily taken for each other; both stand side by side somewhere. */
export const lookalikes: [string, string][] = [
  ['FL-002', 'FL-010'],
  ['SY-020', 'SY-120'],
  ['SU-012', 'SU-014'],
  ['GL-011', 'GL-012'],
]

/** GS1's prefix for examples, 952: such a number is nobody's. */
function exampleGtin(level: '0' | '1', serial: number): string {
  const body = `${level}9520417${String(serial).padStart(5, '0')}`
  for (let digit = 0; digit < 10; digit += 1) if (hasCheckDigit(`${body}${digit}`)) return `${body}${digit}`
  throw new RangeError(`no check digit for ${body}`)
}

function uses(text: string): DemoUse[] {
  return text.split(', ').map((place) => {
    const [roomKey = '', mean = '', shape = ''] = place.split(' ')
    return { roomKey, meanPerDay: Number(mean), shape: shapes[shape]! }
  })
}

function toItem(category: string, row: ItemRow, serial: number): DemoItem {
  const [code, name, orderName, unit, pack, ved, supplier, price, shelfLife, places] = row
  const [orderUnit = '', size = ''] = pack.split('/')
  const unitsPerOrder = Number(size)
  return {
    code,
    name,
    orderName,
    unitOfUse: unit,
    unitCode: units[unit].code,
    countUnit: unit,
    countNote: units[unit].note,
    ved,
    category,
    shelfLifeDays: shelfLife || null,
    minShelfDays: shelfLife ? Math.min(180, Math.round(shelfLife / 6)) : null,
    latex: latex.has(code),
    coldChain: false,
    supplier,
    supplierItem: `${supplier}-${String(40_000 + serial * 37)}`,
    price,
    orderUnit,
    unitsPerOrder,
    gtins: [
      { gtin: exampleGtin('0', serial), level: 'each' },
      ...(unitsPerOrder > 1 ? [{ gtin: exampleGtin('1', serial), level: 'pack' as const }] : []),
    ],
    uses: uses(places),
  }
}

/** Every item of the demo hospital, in the order in which the shelves are filled. */
export const items: DemoItem[] = Object.entries({ ...access, ...infusion, ...airway, ...wound, ...care })
  .flatMap(([category, rows]) => rows.map((row) => ({ category, row })))
  .map(({ category, row }, i) => toItem(category, row, 101 + i))
