import { exposureOf, type ActivityChange } from './activity.ts'

/** Use of one bin over one stretch with something on the shelf. Epoch ms and units. */
export interface ProfileUse {
  from: number
  to: number
  quantity: number
}

/** What a profile is learned from. */
export interface ProfileInput {
  zone: string
  /** The intervals of each bin of a ward: used ones that did not end empty. */
  bins: readonly (readonly ProfileUse[])[]
  /** Planned changes that bore on all of them. */
  changes?: readonly ActivityChange[]
}

/** One interval as the estimate sees it: use, and local days of Monday to Sunday in it. */
export interface WeekdayUse {
  quantity: number
  days: readonly number[]
}

const fewestIntervals = 20
/** As if so many units, times the variance-to-mean ratio, had been used on each weekday alike (our choice). */
const priorUnits = 10
const everyDayAlike = [1, 1, 1, 1, 1, 1, 1]
const mostRounds = 100
const closeEnough = 1e-10

/**
 * Weights of Monday to Sunday, mean 1, for a ward: E[use of bin b in interval i] = μ_b Σ_d (days d in i) g_d, with μ of
 * each bin its own and g shared by all (statistics 4.12). Planned changes count as in the exposure.
 *
 * Below 20 intervals, and where every interval holds each weekday alike so that nothing tells them apart, all 1. With
 * little to go by the weights are drawn towards 1: a gamma prior with mean 1 on each g_d worth 10 units of use, times the
 * variance-to-mean ratio of the ward's use, since units taken together tell no more than one. Alone it gives a weight a
 * deviation of about a third.
 */
export function weekdayProfile({ zone, bins, changes = [] }: ProfileInput): number[] {
  const perWeekday = everyDayAlike.map((_, day) =>
    exposureOf({ zone, weekday: everyDayAlike.map((_, other) => (other === day ? 7 : 0)), changes }),
  )
  const daysOf = (use: ProfileUse): number[] => perWeekday.map((on) => on.between(use.from, use.to).days / 7)
  const uses = bins.map((bin) =>
    bin.map((use) => ({ quantity: use.quantity, days: daysOf(use) })).filter((use) => sumOf(use.days) > 0),
  )
  if (uses.flat().length < fewestIntervals || !isTelling(uses)) return [...everyDayAlike]
  const first = fitWeekdays(uses, priorUnits)
  return fitWeekdays(uses, priorUnits * Math.max(1, dispersion(uses, first)))
}

const sumOf = (figures: readonly number[]): number => figures.reduce((sum, figure) => sum + figure, 0)

/** Whether the intervals of some bin differ in the weekdays they hold. */
const isTelling = (bins: readonly (readonly WeekdayUse[])[]): boolean =>
  bins.some((uses) => {
    const shares = uses.map(({ days }) => days.map((day) => day / sumOf(days)))
    return shares.some((share) => share.some((part, day) => Math.abs(part - shares[0]![day]!) > 1e-9))
  })

/**
 * Poisson maximum likelihood of the weights with a gamma prior of mean 1 and shape `prior` on each, in ln g. μ of a bin
 * drops out as its use over its weighted days; what is left is solved by Fisher scoring with halved steps. A use below
 * 0 counts as none.
 *
 * @param prior units, above 0: so much use on each weekday alike
 * @returns mean 1
 */
export function fitWeekdays(bins: readonly (readonly WeekdayUse[])[], prior: number): number[] {
  const ready = bins.map(totals).filter((bin) => bin.use > 0)
  let logs = everyDayAlike.map(() => 0)
  let height = logPosterior(ready, logs, prior)
  for (let round = 0; round < mostRounds; round += 1) {
    const { slope, information } = scoreAt(ready, logs, prior)
    const step = solve(information, slope)
    let scale = 1
    let next = logs
    let nextHeight = -Infinity
    for (; scale > 1e-6 && !(nextHeight >= height); scale /= 2) {
      next = logs.map((log, day) => log + scale * step[day]!)
      nextHeight = logPosterior(ready, next, prior)
    }
    if (!(nextHeight >= height)) break
    const moved = Math.max(...next.map((log, day) => Math.abs(log - logs[day]!)))
    logs = next
    height = nextHeight
    if (moved < closeEnough) break
  }
  const weights = logs.map(Math.exp)
  return weights.map((weight) => (7 * weight) / sumOf(weights))
}

interface BinTotals {
  uses: WeekdayUse[]
  use: number
  days: number[]
}

function totals(uses: readonly WeekdayUse[]): BinTotals {
  const kept = uses.map((use) => ({ quantity: Math.max(0, use.quantity), days: use.days }))
  return {
    uses: kept,
    use: sumOf(kept.map((use) => use.quantity)),
    days: everyDayAlike.map((_, day) => sumOf(kept.map((use) => use.days[day]!))),
  }
}

const weighed = (days: readonly number[], weights: readonly number[]): number =>
  days.reduce((sum, count, day) => sum + count * weights[day]!, 0)

function logPosterior(bins: readonly BinTotals[], logs: readonly number[], prior: number): number {
  const weights = logs.map(Math.exp)
  const likelihood = bins.map(
    (bin) =>
      sumOf(bin.uses.map((use) => (use.quantity > 0 ? use.quantity * Math.log(weighed(use.days, weights)) : 0))) -
      bin.use * Math.log(weighed(bin.days, weights)),
  )
  return sumOf(likelihood) + prior * sumOf(logs.map((log, day) => log - weights[day]!))
}

/** Slope of the log posterior in ln g, and its expected information. */
function scoreAt(
  bins: readonly BinTotals[],
  logs: readonly number[],
  prior: number,
): { slope: number[]; information: number[][] } {
  const weights = logs.map(Math.exp)
  const slope = weights.map((weight) => prior * (1 - weight))
  const information = weights.map((weight, row) => weights.map((_, column) => (row === column ? prior * weight : 0)))
  const add = (shares: readonly number[], times: number): void =>
    shares.forEach((share, row) =>
      shares.forEach((other, column) => {
        information[row]![column]! += times * share * other
      }),
    )
  for (const bin of bins) {
    const all = weighed(bin.days, weights)
    const whole = bin.days.map((days, day) => (days * weights[day]!) / all)
    whole.forEach((share, day) => (slope[day]! -= bin.use * share))
    add(whole, -bin.use)
    for (const use of bin.uses) {
      const part = weighed(use.days, weights)
      const shares = use.days.map((days, day) => (days * weights[day]!) / part)
      shares.forEach((share, day) => (slope[day]! += use.quantity * share))
      add(shares, (bin.use * part) / all)
    }
  }
  return { slope, information }
}

/** Solves a small symmetric positive definite system by elimination with pivots. */
function solve(matrix: readonly (readonly number[])[], right: readonly number[]): number[] {
  const rows = matrix.map((row, i) => [...row, right[i]!])
  const size = rows.length
  for (let column = 0; column < size; column += 1) {
    const pivot = rows.slice(column).reduce((best, row, i, tail) => {
      return Math.abs(row[column]!) > Math.abs(tail[best]![column]!) ? i : best
    }, 0)
    ;[rows[column], rows[column + pivot]] = [rows[column + pivot]!, rows[column]!]
    for (let row = column + 1; row < size; row += 1) {
      const factor = rows[row]![column]! / rows[column]![column]!
      for (let k = column; k <= size; k += 1) rows[row]![k]! -= factor * rows[column]![k]!
    }
  }
  const found = Array<number>(size).fill(0)
  for (let row = size - 1; row >= 0; row -= 1) {
    const known = sumOf(found.map((value, k) => (k > row ? value * rows[row]![k]! : 0)))
    found[row] = (rows[row]![size]! - known) / rows[row]![row]!
  }
  return found
}

/** Pearson's statistic over its degrees of freedom, all bins together. */
function dispersion(bins: readonly (readonly WeekdayUse[])[], weights: readonly number[]): number {
  let [statistic, freedom] = [0, -6]
  for (const bin of bins.map(totals)) {
    if (bin.use === 0) continue
    const perDay = bin.use / weighed(bin.days, weights)
    for (const use of bin.uses) {
      const expected = perDay * weighed(use.days, weights)
      statistic += (use.quantity - expected) ** 2 / expected
    }
    freedom += bin.uses.length - 1
  }
  return freedom > 0 ? statistic / freedom : 1
}
