import { DateTime } from 'luxon'

/** Neighbouring local days: `starts[i]` begins day i in epoch ms, `starts[i + 1]` ends it. */
export interface LocalDays {
  starts: readonly number[]
  /** 1 (Monday) to 7, of the first of them. */
  firstWeekday: number
}

/** What was worked out before, one run of days a zone; it only saves work. */
const known = new Map<string, { starts: number[]; firstWeekday: number }>()

/**
 * The local days from the one that holds `from` to the one that holds `to`, by wall time: a day on which the clocks
 * change has 23 or 25 hours.
 *
 * @param from epoch ms
 * @param to epoch ms, not before `from`
 * @throws {RangeError} for a zone that does not exist or moments that are no numbers
 */
export function localDays(zone: string, from: number, to: number): LocalDays {
  const run = grown(zone, from, to)
  const first = run.starts.findLastIndex((start) => start <= from)
  const last = run.starts.findIndex((start) => start > to)
  return {
    starts: run.starts.slice(first, last + 1),
    firstWeekday: ((run.firstWeekday - 1 + first) % 7) + 1,
  }
}

function grown(zone: string, from: number, to: number): { starts: number[]; firstWeekday: number } {
  if (!Number.isFinite(from) || !Number.isFinite(to)) throw new RangeError('a day needs a moment in epoch ms')
  const begin = DateTime.fromMillis(from, { zone }).startOf('day')
  if (!begin.isValid) throw new RangeError(`${zone} is no time zone this program knows`)
  let run = known.get(zone)
  if (!run) known.set(zone, (run = { starts: [begin.toMillis()], firstWeekday: begin.weekday }))
  if (run.starts[0]! > from) {
    const earlier = daysUntil(begin, run.starts[0]! - 1)
    run.starts = [...earlier, ...run.starts]
    run.firstWeekday = begin.weekday
  }
  if (run.starts.at(-1)! <= to) {
    const end = DateTime.fromMillis(run.starts.at(-1)!, { zone }).plus({ days: 1 })
    run.starts = [...run.starts, ...daysUntil(end, to), startAfter(to, zone)]
  }
  return run
}

const startAfter = (moment: number, zone: string): number =>
  DateTime.fromMillis(moment, { zone }).startOf('day').plus({ days: 1 }).startOf('day').toMillis()

/** Starts of the days from one on whose start is not after a moment. */
function daysUntil(first: DateTime, moment: number): number[] {
  const starts: number[] = []
  for (let ahead = 0; ; ahead += 1) {
    const start = first.plus({ days: ahead }).startOf('day').toMillis()
    if (start > moment) return starts
    starts.push(start)
  }
}
