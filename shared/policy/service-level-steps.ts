/** Aims as odds: a run-out in one delivery cycle of so many. */
export const oddsSteps = [20, 40, 50, 100, 200, 500, 1000] as const

/** Service level of "1 in n": 1 − 1/n. @example levelOfOdds(200) // => 0.995 */
export const levelOfOdds = (oneIn: number): number => Number((1 - 1 / oneIn).toFixed(6))

/** Odds of a service level, "1 in n", rounded to whole n. @example oddsOfLevel(0.98) // => 50 */
export const oddsOfLevel = (level: number): number => Math.round(1 / (1 - level))

/** The steps a hospital allows, and the present level among them when it is none of them; ascending. */
export function levelSteps(floor: number, ceiling: number, present: number | null): number[] {
  const steps = oddsSteps.map(levelOfOdds).filter((l) => l >= floor && l <= ceiling)
  const known = present === null || steps.some((l) => Math.abs(l - present) < 1e-9)
  return (known ? steps : [...steps, present]).sort((a, b) => a - b)
}
