import { Code128Reader, NotFoundException, OneDReader, type BitArray } from '@zxing/library'

/** The parts of the reader that its types hide. */
interface Code128Parts {
  findStartPattern: (row: BitArray) => Int32Array
  CODE_PATTERNS: Int32Array[]
  MAX_AVG_VARIANCE: number
  MAX_INDIVIDUAL_VARIANCE: number
  CODE_START_A: number
  CODE_START_C: number
}
interface OneDParts {
  patternMatchVariance: (counters: Int32Array, pattern: Int32Array, most: number) => number
}

function bestStart(counters: Int32Array, parts: Code128Parts): number {
  const { patternMatchVariance } = OneDReader as unknown as OneDParts
  let least = parts.MAX_AVG_VARIANCE
  let match = -1
  for (let code = parts.CODE_START_A; code <= parts.CODE_START_C; code += 1) {
    const pattern = parts.CODE_PATTERNS[code] as Int32Array
    const variance = patternMatchVariance(counters, pattern, parts.MAX_INDIVIDUAL_VARIANCE)
    if (variance < least) {
      least = variance
      match = code
    }
  }
  return match
}

/** Bar and space widths along a row, and where the six last seen begin. */
function findStartPattern(row: BitArray): Int32Array {
  const parts = Code128Reader as unknown as Code128Parts
  const width = row.getSize()
  const counters = new Int32Array(6)
  const offset = row.getNextSet(0)
  let position = 0
  let patternStart = offset
  let isWhite = false
  for (let i = offset; i < width; i += 1) {
    if (row.get(i) !== isWhite) {
      counters[position] = (counters[position] ?? 0) + 1
      continue
    }
    if (position < 5) {
      position += 1
    } else {
      const match = bestStart(counters, parts)
      const quiet = Math.max(0, patternStart - (i - patternStart) / 2)
      if (match >= 0 && row.isRange(quiet, patternStart, false)) return Int32Array.from([patternStart, i, match])
      patternStart += (counters[0] ?? 0) + (counters[1] ?? 0)
      // Two counters leave at the front and the array keeps its six places: the library cuts it short here instead,
      // and so loses every Code 128 that has something dark to its left.
      counters.copyWithin(0, 2)
      counters[4] = 0
      counters[5] = 0
      position = 4
    }
    counters[position] = 1
    isWhite = !isWhite
  }
  throw new NotFoundException()
}

/** Puts our search for the start of a Code 128 in place of the library's. Drop it when a release has mended it. */
export function repairCode128(): void {
  ;(Code128Reader as unknown as Code128Parts).findStartPattern = findStartPattern
}
