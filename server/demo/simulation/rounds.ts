import { drawOne, type Random } from '#shared/kernel/random.ts'
import type { DemoRoom } from '../catalogue/places.ts'
import { people } from '../catalogue/people.ts'
import { story } from '../story.ts'
import { atHour, dayMs, type Day } from './days.ts'
import { keyed } from './keyed.ts'
import type { SimWindow } from './sim-types.ts'

/** One walk through a room by one person with one phone. */
export interface Round {
  id: string
  at: number
  person: string
  device: string
  /** No signal: entries come in together when the walk is done. */
  isOffline: boolean
  /** Nothing is left out. */
  isWhole: boolean
}

const hourMs = dayMs / 24
/** A walk is over by then. */
export const longestWalkMs = 35 * 60_000
const skippedRounds = 0.08
const morningShare = 0.65
const morning = { from: 6.8, to: 8.6 }
const late = { from: 19.6, to: 20.8 }

/** Somebody of the ward, with one of its phones. */
export const wardHands = (room: DemoRoom, random: Random): { person: string; device: string } => ({
  person: drawOne(random, staffOf(room)),
  device: deviceOf(room, random()),
})

const staffOf = (room: DemoRoom): string[] =>
  people.filter((p) => p.role === 'nurse' && p.rooms?.includes(room.code)).map((p) => p.staffCode)

/** Two phones a ward. */
const deviceOf = (room: DemoRoom, draw: number): string => `tg-${room.ward.toLowerCase()}-${draw < 0.6 ? 1 : 2}`

function roundAt(room: DemoRoom, at: number, isWhole: boolean): Round {
  const random = keyed('round', room.code, at)
  return {
    id: `${room.code}/${at}`,
    at,
    person: drawOne(random, staffOf(room)),
    device: deviceOf(room, random()),
    isOffline: random() < 0.12,
    isWhole,
  }
}

/** When the room's rounds begin by its own habit: around its rhythm, mornings mostly, now and then none. */
function habit(room: DemoRoom, days: readonly Day[]): number[] {
  const rhythm = room.countEveryDays
  const first = days[0]?.ordinal ?? 0
  const lastDay = days.at(-1)?.ordinal ?? 0
  const phase = keyed('phase', room.code)() * rhythm
  const byOrdinal = new Map(days.map((d) => [d.ordinal, d]))
  const starts = new Map<number, number>()
  for (let k = Math.floor(first / rhythm) - 1; k <= Math.ceil(lastDay / rhythm) + 1; k += 1) {
    const random = keyed('habit', room.code, k)
    const day = countingDay(room, byOrdinal, Math.floor(k * rhythm + phase + (random() - 0.5) * 0.7 * rhythm))
    if (!day || random() < skippedRounds || starts.has(day.ordinal)) continue
    const shift = random() < morningShare ? morning : late
    starts.set(day.ordinal, atHour(day, shift.from + random() * (shift.to - shift.from)))
  }
  return [...starts.values()].sort((a, b) => a - b)
}

const counts = (room: DemoRoom, day: Day): boolean => !room.countDays || room.countDays.includes(String(day.weekday))

/** That day, or the next on which the room counts. */
function countingDay(room: DemoRoom, days: ReadonlyMap<number, Day>, ordinal: number): Day | undefined {
  const day = days.get(ordinal)
  return !day || counts(room, day) ? day : countingDay(room, days, ordinal + 1)
}

/** The newest beginning of a shift at or before `at`. */
function shiftBefore(days: readonly Day[], at: number): number | null {
  const starts = days.flatMap((day) => [atHour(day, morning.from + 0.1), atHour(day, late.from + 0.1)])
  return starts.filter((t) => t <= at).at(-1) ?? null
}

/** The room's rounds that touch the window; the world is left with one that is not too long ago. */
export function roundsOf(room: DemoRoom, days: readonly Day[], window: SimWindow): Round[] {
  const done = habit(room, days).filter((at) => !window.last || at + longestWalkMs <= window.to)
  const closing = window.last ? closingRound(room, days, window, done.at(-1) ?? -Infinity) : null
  return [
    ...done.map((at) => roundAt(room, at, window.last && at === done.at(-1) && isStoryWard(room))),
    ...(closing === null ? [] : [roundAt(room, closing, true)]),
  ].filter((round) => round.at > window.from && round.at <= window.to)
}

const isStoryWard = (room: DemoRoom): boolean => room.ward === story.due.ward

function closingRound(room: DemoRoom, days: readonly Day[], window: SimWindow, newest: number): number | null {
  const oldest = isStoryWard(room) ? 13 * hourMs : 0.7 * room.countEveryDays * dayMs
  if (window.to - newest <= oldest) return null
  const ago = isStoryWard(room) ? 0 : keyed('closing', room.code, window.to)() * 0.4 * room.countEveryDays * dayMs
  const open = days.filter((day) => counts(room, day))
  const at = shiftBefore(open, window.to - longestWalkMs - ago)
  return at !== null && at - newest > 6 * hourMs ? at : null
}
