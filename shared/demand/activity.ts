import { localDays } from '#shared/calendar/local-days.ts'

/** A planned change of what goes on at a place: beds doubled, a new theatre list, a ward closed. */
export interface ActivityChange {
  id: string
  /** Epoch ms. */
  from: number
  /** Epoch ms, exclusive; null: open end. */
  to: number | null
  /** Use against the usual: 0 closed, 1 none, 2 double. */
  factor: number
  /** Units used beside that on each affected local day: units per case × cases. */
  extraPerDay: number
  /** Weekdays 1 (Monday) to 7 on which the extra falls; empty: every day. */
  weekdays: readonly number[]
}

/** How busy a place is, relative to its usual day. */
export interface Activity {
  zone: string
  /** Weights of Monday to Sunday, mean 1. */
  weekday: readonly number[]
  changes: readonly ActivityChange[]
}

/** Usual days between two moments. */
export interface Exposure {
  /**
   * @param from epoch ms
   * @param to epoch ms, not before `from`
   * @returns `days`: usual days, without the extra units; `extraUnits`: planned units beside them
   * @throws {RangeError} when `to` lies before `from`
   */
  between(from: number, to: number): { days: number; extraUnits: number }
}

/** A table of neighbouring stretches of one pace each; sums run from its start. */
interface Paces {
  starts: number[]
  daysPerMs: number[]
  extraPerMs: number[]
  daysBefore: number[]
  extraBefore: number[]
}

const dayMs = 86_400_000
/** So much is added around the span asked, so that a table is not built anew for each interval. */
const marginMs = 90 * dayMs
const everyDayAlike = [1, 1, 1, 1, 1, 1, 1]

/** Every day like the other, nothing planned. */
export const usualActivity = (zone: string): Activity => ({ zone, weekday: everyDayAlike, changes: [] })

/**
 * Exposure under an activity: the integral of weekday weight × factors of the changes (statistics 1.5 and 4.0).
 *
 * A local day weighs what its weekday weighs, spread evenly over its 23, 24 or 25 hours; where all weekdays weigh the
 * same, time is time and an hour is a 24th of a day. Changes that overlap multiply, extra units add up and are spread
 * over their local day; in a closed time there are none. Made to be shared by many bins: the sums are worked out once.
 *
 * @throws {RangeError} for weights that are not seven with mean 1, a negative factor, or a change that ends before it
 *   begins
 */
export function exposureOf(activity: Activity): Exposure {
  check(activity)
  const usual = isFlat(activity.weekday) && activity.changes.every((c) => c.factor === 1 && c.extraPerDay === 0)
  let paces: Paces | null = null
  return {
    between(from, to) {
      if (!(to >= from)) throw new RangeError('exposure runs from a moment to a later one')
      if (usual) return { days: (to - from) / dayMs, extraUnits: 0 }
      if (!paces || from < paces.starts[0]! || to > paces.starts.at(-1)!) paces = pacesOver(activity, paces, from, to)
      const [begin, end] = [sumsAt(paces, from), sumsAt(paces, to)]
      return { days: end.days - begin.days, extraUnits: end.extraUnits - begin.extraUnits }
    },
  }
}

function check({ weekday, changes }: Activity): void {
  const mean = weekday.reduce((sum, weight) => sum + weight, 0) / 7
  if (weekday.length !== 7 || weekday.some((weight) => !(weight >= 0)) || Math.abs(mean - 1) > 1e-3)
    throw new RangeError('weekday weights are seven figures, Monday first, none negative, with mean 1')
  for (const change of changes) {
    if (!(change.factor >= 0 && change.extraPerDay >= 0))
      throw new RangeError('a planned change has a factor and extra units of 0 or more')
    if (change.to !== null && change.to < change.from) throw new RangeError('a planned change ends after it begins')
  }
}

const isFlat = (weekday: readonly number[]): boolean => weekday.every((weight) => weight === weekday[0])

function pacesOver(activity: Activity, before: Paces | null, from: number, to: number): Paces {
  const begin = Math.min(from, before?.starts[0] ?? from) - marginMs
  const end = Math.max(to, before?.starts.at(-1) ?? to) + marginMs
  const days = localDays(activity.zone, begin, end)
  const flat = isFlat(activity.weekday)
  const paces: Paces = { starts: [], daysPerMs: [], extraPerMs: [], daysBefore: [], extraBefore: [] }
  let [daysSum, extraSum] = [0, 0]
  const add = (start: number, end: number, daysPerMs: number, extraPerMs: number): void => {
    paces.starts.push(start)
    paces.daysPerMs.push(daysPerMs)
    paces.extraPerMs.push(extraPerMs)
    paces.daysBefore.push(daysSum)
    paces.extraBefore.push(extraSum)
    daysSum += daysPerMs * (end - start)
    extraSum += extraPerMs * (end - start)
  }
  for (let i = 0; i + 1 < days.starts.length; i += 1) {
    const [dayStart, dayEnd] = [days.starts[i]!, days.starts[i + 1]!]
    const weekday = ((days.firstWeekday - 1 + i) % 7) + 1
    const perMs = flat ? 1 / dayMs : activity.weekday[weekday - 1]! / (dayEnd - dayStart)
    const touching = activity.changes.filter((c) => c.from < dayEnd && (c.to ?? Infinity) > dayStart)
    const cuts = cutsOf(touching, dayStart, dayEnd)
    cuts.slice(1).forEach((cut, k) => {
      const present = touching.filter((c) => c.from <= cuts[k]! && (c.to ?? Infinity) > cuts[k]!)
      const factor = present.reduce((product, c) => product * c.factor, 1)
      const extra = factor === 0 ? 0 : present.reduce((sum, c) => sum + extraOn(c, weekday), 0)
      add(cuts[k]!, cut, perMs * factor, extra / (dayEnd - dayStart))
    })
  }
  add(days.starts.at(-1)!, days.starts.at(-1)!, 0, 0)
  return paces
}

/** Moments within a day at which the pace changes, its bounds included. */
function cutsOf(changes: readonly ActivityChange[], dayStart: number, dayEnd: number): number[] {
  const inside = changes.flatMap((c) => [c.from, c.to ?? Infinity]).filter((at) => at > dayStart && at < dayEnd)
  return [...new Set([dayStart, ...inside, dayEnd])].sort((a, b) => a - b)
}

const extraOn = (change: ActivityChange, weekday: number): number =>
  change.weekdays.length === 0 || change.weekdays.includes(weekday) ? change.extraPerDay : 0

function sumsAt(paces: Paces, moment: number): { days: number; extraUnits: number } {
  let [low, high] = [0, paces.starts.length - 1]
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (paces.starts[middle]! <= moment) low = middle
    else high = middle - 1
  }
  const since = moment - paces.starts[low]!
  return {
    days: paces.daysBefore[low]! + paces.daysPerMs[low]! * since,
    extraUnits: paces.extraBefore[low]! + paces.extraPerMs[low]! * since,
  }
}
