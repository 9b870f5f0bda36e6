import { nextCountAt, type CountingCalendar } from '#shared/calendar/counting-calendar.ts'

const dayMs = 86_400_000
const lastPlanned = 7
/** Counts closer than this are one count, as for intervals of use. */
const oneCountMs = dayMs / 2
/** A planned count may come later by this share of the rhythm, and by half a day in any case (our choice). */
const graceShare = 0.5
const shortestGraceMs = dayMs / 2

/**
 * How many of the last 7 planned counts were made. A count sets the next one due a rhythm later, on a counting day; it
 * is kept when the next count comes by then or within half a rhythm after it, at least 12 hours. When it is not, the one
 * after it is due a rhythm later still, and so on. What is not overdue yet does not count.
 *
 * @param countTimes epoch ms, any order
 * @param asOf epoch ms
 * @param counting days on which the room counts; every day without it
 * @returns `of` below 7 while the place is new
 * @throws {RangeError} when the rhythm is not above 0
 */
export function countsKept(
  countTimes: readonly number[],
  plannedDays: number,
  asOf: number,
  counting: CountingCalendar | null = null,
): { kept: number; of: number } {
  if (!(plannedDays > 0)) throw new RangeError('a rhythm of counting is more than 0 days')
  const grace = Math.max(shortestGraceMs, graceShare * plannedDays * dayMs)
  const counts = apart(countTimes.filter((at) => at <= asOf).sort((a, b) => a - b))
  /** Planned counts after this one that were overdue by then; more than 7 say no more than 7. */
  const missed = (count: number, then: number): number => {
    let due = nextCountAt(counting, count, plannedDays)
    let overdue = 0
    for (; due + grace < then && overdue < lastPlanned; overdue += 1) due = nextCountAt(counting, due, plannedDays)
    return overdue
  }
  const outcomes = counts.flatMap((count, i) => {
    const next = counts[i + 1]
    const lost = Array<boolean>(missed(count, next ?? asOf)).fill(false)
    return next === undefined ? lost : [...lost, true]
  })
  const last = outcomes.slice(-lastPlanned)
  return { kept: last.filter(Boolean).length, of: last.length }
}

/** Counts that are counts of their own. */
const apart = (times: readonly number[]): number[] =>
  times.reduce<number[]>((kept, at) => (kept.length && at - kept.at(-1)! < oneCountMs ? kept : [...kept, at]), [])
