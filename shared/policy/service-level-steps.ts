/** Aims as odds: a run-out in one delivery cycle of so many. */
export const oddsSteps = [20, 40, 50, 100, 200, 500, 1000] as const

/** Closer than this, two levels are one. */
const tie = 1e-9

/** Service level of "1 in n": 1 − 1/n. @example levelOfOdds(200) // => 0.995 */
export const levelOfOdds = (oneIn: number): number => Number((1 - 1 / oneIn).toFixed(6))

/** Odds of a service level, "1 in n", rounded to whole n. @example oddsOfLevel(0.98) // => 50 */
export const oddsOfLevel = (level: number): number => Math.round(1 / (1 - level))

/**
 * The steps a hospital allows, the present level even where it is none of them, and further levels a person asked for;
 * ascending, each once.
 */
export function levelSteps(
  floor: number,
  ceiling: number,
  present: number | null,
  more: readonly number[] = [],
): number[] {
  const allowed = [...oddsSteps.map(levelOfOdds), ...more].filter((l) => l >= floor - tie && l <= ceiling + tie)
  const all = present === null ? allowed : [...allowed, present]
  return all.sort((a, b) => a - b).filter((level, i) => i === 0 || level - (all[i - 1] ?? 0) > tie)
}
