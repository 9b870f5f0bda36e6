const SHORTEST = 6
const MEDIAN_MS = 35
const LONGEST_GAP_MS = 100

/** What of a key event the buffer needs. */
export interface Key {
  key: string
  code: string
  ctrlKey: boolean
  altKey: boolean
  metaKey: boolean
  /** Milliseconds, as `event.timeStamp`. */
  at: number
}

/** `typing`: a person, or too early to say. `fast`: so quick that it is a scanner. */
export type Pace = 'typing' | 'fast'

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 ? (sorted[middle] ?? 0) : ((sorted[middle - 1] ?? 0) + (sorted[middle] ?? 0)) / 2
}

/** Keys of the separator GS: `Ctrl+]`, as scanners send it. */
const isSeparator = (key: Key): boolean => key.ctrlKey && (key.code === 'BracketRight' || key.key === ']')

/**
 * Collects the key events of a keyboard scanner and tells them from a person's typing: at least 6 characters with a
 * median gap of 35 ms and none over 100 ms. Bluetooth bursts jitter, hence the median.
 */
export function makeWedgeBuffer() {
  let text = ''
  let gaps: number[] = []
  let last = 0
  /** Digits of an Alt sequence: Alt+029 is the separator too. */
  let altDigits = ''

  function clear(): void {
    text = ''
    gaps = []
    altDigits = ''
  }

  function append(character: string, at: number): void {
    if (text !== '') {
      const gap = at - last
      if (gap > LONGEST_GAP_MS) clear()
      else gaps.push(gap)
    }
    text += character
    last = at
  }

  const isScan = (): boolean => text.length >= SHORTEST && median(gaps) <= MEDIAN_MS

  return {
    /** The present text, for the end after a silence. */
    get text(): string {
      return text
    },
    isScan,
    clear,
    pace: (): Pace => (text.length >= 3 && median(gaps) <= MEDIAN_MS ? 'fast' : 'typing'),
    /** Takes a key; true when it belongs to what is being collected. */
    push(key: Key): boolean {
      if (isSeparator(key)) {
        append('\u001d', key.at)
        return true
      }
      if (key.altKey && /^[0-9]$/.test(key.key)) {
        altDigits += key.key
        if (altDigits.endsWith('029') || altDigits.endsWith('29')) {
          altDigits = ''
          append('\u001d', key.at)
        }
        return true
      }
      if (key.ctrlKey || key.metaKey || key.altKey || [...key.key].length !== 1) return false
      append(key.key, key.at)
      return true
    },
    /** Takes the text when it was a scan, else null; the buffer is empty afterwards. */
    finish(): string | null {
      const scan = isScan() ? text : null
      clear()
      return scan
    },
  }
}
