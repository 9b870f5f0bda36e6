/** Use over a stretch, as an interval of demand has it. */
export interface SeenUse {
  quantity: number
  /** Usual days, without the change that is looked at. */
  exposureDays: number
}

/** One bin of a change's scope. */
export interface SeenBin {
  /** Units a usual day used before the change. */
  basePerDay: number
  /** Its used intervals inside the change. */
  inside: readonly SeenUse[]
}

/** The factor entered weighs as much as so many intervals (our choice). */
const enteredWeighs = 4
/** Stands for no use at all, so that a factor is never 0 by chance (see `withExtraUnits`). */
const halfUnit = 0.5
/** Fewer intervals than this on either side say nothing of a year ago. */
const fewestIntervals = 4

const sum = (uses: readonly SeenUse[], of: (use: SeenUse) => number): number =>
  uses.reduce((total, use) => total + of(use), 0)

/**
 * What a planned change really did, against the factor entered for it ("entered 2.0, seen 1.7"), over all its bins.
 *
 * seen = use inside ÷ what the base rates would have used in the same usual days. The one in use moves from entered to
 * seen as counts arrive: used = entered^(1 − q) · seen^q with q = n ÷ (n + 4), n intervals inside. A closure, entered 0,
 * stays 0.
 *
 * @returns `seen` null before the first interval, or where nothing was used before
 */
export function seenFactor(input: { entered: number; bins: readonly SeenBin[] }): {
  seen: number | null
  intervals: number
  used: number
} {
  const { entered, bins } = input
  const inside = bins.flatMap((bin) => bin.inside)
  const intervals = inside.length
  const expected = bins.reduce((total, bin) => total + bin.basePerDay * sum(bin.inside, (use) => use.exposureDays), 0)
  if (intervals === 0 || !(expected > 0)) return { seen: null, intervals, used: entered }
  const seen =
    Math.max(
      halfUnit,
      sum(inside, (use) => use.quantity),
    ) / expected
  const share = intervals / (intervals + enteredWeighs)
  return { seen, intervals, used: entered ** (1 - share) * seen ** share }
}

/**
 * The factor of the same days a year ago: use a day inside them over use a day in the weeks before.
 *
 * @param uses `before`: those of the 8 weeks before
 * @returns null with fewer than 4 intervals on either side, or with no use before
 */
export function lastYearFactor(uses: { inside: readonly SeenUse[]; before: readonly SeenUse[] }): number | null {
  const { inside, before } = uses
  if (inside.length < fewestIntervals || before.length < fewestIntervals) return null
  const perDay = (stretch: readonly SeenUse[]): number =>
    sum(stretch, (use) => use.quantity) / sum(stretch, (use) => use.exposureDays)
  const usual = perDay(before)
  return usual > 0 ? Math.max(0, perDay(inside)) / usual : null
}
