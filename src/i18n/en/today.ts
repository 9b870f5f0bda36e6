import type { Today } from '#shared/contracts/replenishment.ts'
import type { Moment } from './catalogue.ts'
import { clock, counted, dateOf, dueShort, duration, near, quantity } from './format.ts'

type Coordinator = NonNullable<Today['coordinator']>
type Reviewer = NonNullable<Today['reviewer']>
type CutOff = Coordinator['cutOffs'][number]

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

export const todayWords = {
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
