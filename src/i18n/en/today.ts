import type { Today } from '#shared/contracts/replenishment.ts'
import type { PolicyRun } from '#shared/contracts/policy.ts'
import type { z } from 'zod'
import type { Moment } from './catalogue.ts'
import { calendarWords } from './calendars.ts'
import { clock, counted, dateOf, dayAndClock, dueShort, duration, near, quantity } from './format.ts'

type Coordinator = NonNullable<Today['coordinator']>
type Reviewer = NonNullable<Today['reviewer']>
type CutOff = Coordinator['cutOffs'][number]
type Gap = Coordinator['gaps'][number]
/** A run over every place takes minutes; one that is older and not through was cut short. */
const LONG_RUN_MINUTES = 180

const minutesLeft = (iso: string, now: string): number => Math.floor((Date.parse(iso) - Date.parse(now)) / 60_000)

/** "10:00" today, else with the day. */
const byWhen = (iso: string, at: Moment): string =>
  dateOf(iso, at.zone) === dateOf(at.now, at.zone) ? clock(iso, at.zone) : near(iso, at.now, at.zone)

function coordinatorHeading(today: Coordinator, at: Moment): string {
  const next = today.cutOffs.find((cut) => cut.toOrder > 0 && minutesLeft(cut.orderBy, at.now) >= 0)
  if (!next) return today.toOrder > 0 ? `${quantity(today.toOrder)} to order` : 'Nothing to order'
  return `${quantity(next.toOrder)} to order from ${next.supplierName} by ${byWhen(next.orderBy, at)}`
}

function reviewerHeading(today: Reviewer): string {
  const parts = [
    today.due > 0 ? `${quantity(today.due)} due for review` : null,
    today.proposed > 0 ? `${quantity(today.proposed)} proposed to you` : null,
  ].filter((part) => part !== null)
  return parts.length ? parts.join(', ') : 'Nothing is due for review'
}

/** How far the run over every place has come; null where it is through, or there was none. */
function runWords(run: z.infer<typeof PolicyRun> | null, at: Moment): { what: string; action: string } | null {
  if (!run || run.finishedAt !== null) return null
  const far = `${quantity(run.done)} of ${counted(run.bins, 'place')}`
  const began = near(run.startedAt, at.now, at.zone)
  return minutesLeft(at.now, run.startedAt) > LONG_RUN_MINUTES
    ? {
        what: `The run over every place that began ${began} did not finish: ${far}.`,
        action: 'The rest keep the figures they had. It goes on where it stopped by itself.',
      }
    : {
        what: `Every place is worked out anew: ${far} so far, since ${began}.`,
        action: 'Nothing to do. The others keep the figures they had until it is their turn.',
      }
}

export const todayWords = {
  holidays: 'Before a holiday',
  gap: (gap: Gap): string =>
    gap.places > 0
      ? `${gap.name}: ${counted(gap.places, 'place')} would not last`
      : `${gap.name}: every place lasts, with what is in drafts and on order`,
  gapBy: (gap: Gap, at: Moment): string => `last order to ${gap.supplierName} ${dayAndClock(gap.lastOrderBy, at.zone)}`,
  toLook: 'To look at',
  emptyYear: (calendar: Coordinator['calendars'][number]): string =>
    calendarWords.emptyYearOf(calendar.name, calendar.emptyYear),
  asked: (n: number): string => `${counted(n, 'place')} asked about`,
  askedRow: 'Places asked about',
  askedWhat: 'Use so unlike the rest that a word on it helps.',
  run: runWords,
  coordinatorHeading,
  reviewerHeading,
  administratorHeading: (problems: number): string =>
    problems === 0 ? 'Everything is working' : `${counted(problems, 'thing')} to look at`,
  cutOffs: 'Next cut-offs',
  noCutOffs: 'Nothing has to be ordered, so no cut-off is near.',
  left: (cut: CutOff, at: Moment): string => {
    const minutes = minutesLeft(cut.orderBy, at.now)
    return minutes < 0 ? 'passed' : `${duration(minutes)} left`
  },
  cutOff: (cut: CutOff, at: Moment): string =>
    `${quantity(cut.toOrder)} to order by ${byWhen(cut.orderBy, at)}; comes ${near(cut.arrives, at.now, at.zone)}`,
  mayRunOut: 'May run out before it arrives',
  noneMayRunOut: 'Nothing is likely to run out before its next delivery.',
  outBy: (outBy: string | null, next: string | null, at: Moment): string => {
    const today = dateOf(at.now, at.zone)
    const out = outBy ? `out ${dueShort(outBy, today)}` : 'may run out'
    return next ? `${out}, next ${dueShort(dateOf(next, at.zone), today)}` : out
  },
  atRisk: 'Most at risk first',
  estimates: 'Estimates from counts. Your judgement and facility policy come first.',
  countFirst: 'Count first',
  countFirstWhat: 'By the record there is enough, by expected use probably not.',
  late: 'Late deliveries',
  lateOrder: (days: number): string => `${counted(days, 'working day')} late`,
  toOrder: (n: number): string => `To order, ${quantity(n)}`,
  due: 'Due for review',
  thisWeek: 'Due this week',
  proposed: 'Proposed to you',
  moved: 'Moved since your last look',
  noneMoved: 'No reorder point moved.',
  moves: (from: number | null, to: number): string =>
    from === null ? `now ${quantity(to)}` : `${quantity(from)} → ${quantity(to)}`,
  allWell: 'Mail goes out, jobs run, every phone has reported.',
  open: 'Open',
} as const
