/** Uniform draws in [0, 1), one after the other. */
export type Random = () => number

/** 32-bit hash of a text, continued from `state`. FNV-1a with the finalizer of MurmurHash3 (Appleby, public domain). */
function hash(text: string, state: number): number {
  let h = state
  for (let i = 0; i < text.length; i += 1) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193)
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b)
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35)
  return h ^ (h >>> 16)
}

/**
 * A generator of its own for every text: the same text gives the same draws on every machine, different texts give
 * draws that have nothing to do with each other. For simulations and tests, never for secrets.
 *
 * Algorithm: sfc32 (C. Doty-Humphrey, PractRand), 32 bits a draw, period at least 2^32.
 *
 * @example seededRandom('a')() === seededRandom('a')() // => true
 */
export function seededRandom(seed: string): Random {
  let a = hash(seed, 0x811c9dc5)
  let b = hash(seed, a ^ 0x9e3779b9)
  let c = hash(seed, b ^ 0x243f6a88)
  let counter = 1
  const next = (): number => {
    const t = (((a + b) | 0) + counter) | 0
    counter = (counter + 1) | 0
    a = b ^ (b >>> 9)
    b = (c + (c << 3)) | 0
    c = ((c << 21) | (c >>> 11)) + t
    c |= 0
    return (t >>> 0) / 4_294_967_296
  }
  for (let i = 0; i < 12; i += 1) next()
  return next
}

/**
 * That many bytes, for whoever asks a random source for bytes.
 * @example randomBytesOf(seededRandom('a'), 2).length // => 2
 */
export const randomBytesOf = (random: Random, count: number): Uint8Array =>
  Uint8Array.from({ length: count }, () => Math.floor(random() * 256))

/**
 * A whole number from `low` to `high`, both included, each equally likely.
 * @example drawInteger(() => 0.999, 1, 6) // => 6
 */
export const drawInteger = (random: Random, low: number, high: number): number =>
  low + Math.floor(random() * (high - low + 1))

/**
 * One of the entries of a list that is not empty.
 * @throws {RangeError} when the list is empty
 * @example drawOne(() => 0, ['x', 'y']) // => 'x'
 */
export function drawOne<T>(random: Random, list: readonly T[]): T {
  const chosen = list[Math.floor(random() * list.length)]
  if (chosen === undefined) throw new RangeError('nothing to draw from')
  return chosen
}
