import type { Random } from '#shared/kernel/random.ts'

/** What was written down, and what it was mended to a minute later. */
export interface Found {
  first: number
  corrected: number | null
}

const mistyped = 0.004
const boxOverlooked = 0.0055
const oneOff = 0.03

/** A person counts: nearly always right, now and then one off, rarely mistyped and mended, or a box overlooked. */
export function countOf(truth: number, random: Random): Found {
  const draw = random()
  if (draw < mistyped && truth >= 2 && truth < 1000) return { first: truth * 10, corrected: truth }
  if (draw < boxOverlooked) return { first: Math.floor(truth * 0.7), corrected: null }
  if (draw < oneOff && truth > 5) return { first: truth + (random() < 0.5 ? 1 : -1), corrected: null }
  return { first: truth, corrected: null }
}
