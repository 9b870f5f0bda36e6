import type { ClassOutlook, ReviewRow } from '#shared/contracts/policy.ts'
import type { AimStep } from '#src/components/review/aim-steps.ts'
import type { Computed } from '#src/components/policy/why-policy.ts'
import { vedWords } from './common.ts'
import { counted, day, decimal, money, odds, oddsIn, onceIn, percent, quantity, signed } from './format.ts'

export type ReviewShow = 'due' | 'proposed' | 'vital' | 'moved' | 'asked' | 'all'

/** Run-outs in a year, or how many years to one; an estimate, so in round numbers. */
function perYear(runOuts: number): string {
  if (runOuts >= 0.75) return `about ${counted(Math.round(runOuts), 'run-out')} a year`
  if (runOuts < 0.01) return 'less than 1 run-out in 100 years'
  return `about 1 run-out in ${quantity(Math.round(1 / runOuts))} years`
}

export const reviewWords = {
  title: 'Review',
  lead: 'How sure each place is meant to be, and what happened.',
  shows: {
    vital: 'Vital items',
    due: 'Due for review',
    proposed: 'Proposed',
    moved: 'Moved',
    asked: 'Asked about',
    all: 'All',
  } satisfies Record<ReviewShow, string>,
  which: 'Show',
  columns: {
    item: 'Item',
    room: 'Room',
    point: 'Reorder point',
    aim: 'Aim: may run out',
    happened: 'What happened',
    counts: 'Counts',
    reviewBy: 'Review by',
  },
  aimShort: (level: number): string => `aim 1 in ${quantity(oddsIn(level))}`,
  aimCell: (level: number): string => `1 in ${quantity(oddsIn(level))}`,
  happened: (row: Pick<ReviewRow, 'runOuts'>): string =>
    row.runOuts.cycles === 0 ? 'no cycles yet' : `${quantity(row.runOuts.found)} of ${quantity(row.runOuts.cycles)}`,
  ranOut: (row: Pick<ReviewRow, 'runOuts'>): string =>
    row.runOuts.cycles === 0
      ? 'no delivery cycles yet'
      : `ran out ${quantity(row.runOuts.found)} of ${quantity(row.runOuts.cycles)}`,
  happenedNote: 'What happened: delivery cycles in which it was found empty, of those on record.',
  due: (row: Pick<ReviewRow, 'review' | 'reviewBy'>): string | null => {
    if (!row.reviewBy) return null
    if (row.review === 'due') return `review due since ${day(row.reviewBy)}`
    return `review by ${day(row.reviewBy)}`
  },
  proposal: (row: ReviewRow): string =>
    row.proposal
      ? `${row.proposal.own ? 'you propose' : `${row.proposal.byName} proposes`} 1 in ${quantity(oddsIn(row.proposal.level))}`
      : '',
  questions: (n: number): string => `${counted(n, 'unusual stretch')}: what was it?`,
  classes: 'What these aims come to, an estimate',
  className: (row: ClassOutlook): string => {
    const name = vedWords[row.ved]
    return `${name.charAt(0).toUpperCase()}${name.slice(1)}`
  },
  classPlaces: (row: ClassOutlook): string =>
    row.workedOut === row.places
      ? counted(row.places, 'place')
      : `${counted(row.places, 'place')}, ${quantity(row.workedOut)} worked out`,
  classRunOuts: (row: ClassOutlook): string =>
    row.workedOut === 0 ? 'nothing worked out yet' : perYear(row.runOutsPerYear),
  none: 'Nothing here',
  noneWhat: (show: ReviewShow): string =>
    show === 'all'
      ? 'No place holds an item yet. Places and items are added under Hospital.'
      : 'No place belongs in this list now. Choose another list above.',
  data: (days: number, intervals: number): string =>
    `${quantity(Math.round(days))} days of counts, ${counted(intervals, 'stretch')} to learn from${intervals < 8 ? ': thin data' : ''}`,
} as const

export const aimWords = {
  title: 'How sure should it be?',
  steps: 'May run out',
  pointNow: (point: number | null): string =>
    point === null ? 'no reorder point' : `reorder point now, ${quantity(point)}`,
  step: (level: number): string => `1 in ${quantity(oddsIn(level))}`,
  stepLong: (level: number): string => odds(level),
  reorderAt: 'reorder at',
  stepLeft: (level: number, safety: number): string => `${percent(level)} · ${decimal(safety)} above use`,
  stepOnce: (chance: number, cycles: number): string => onceIn(chance, cycles),
  difference: (units: number, unit: string): string => (units === 0 ? 'no change' : `${signed(units)} ${unit}`),
  /** What stands on the shelf on average, and what that costs a year. */
  held: (meanStock: number | null, cost: number | null, currency: string): string => {
    if (meanStock === null) return ''
    const cash = cost ? `, ${money(cost >= 10 ? Math.round(cost) : cost, currency)} a year` : ''
    return `${quantity(Math.round(meanStock))} kept${cash}`
  },
  now: 'now',
  other: 'Another aim',
  otherHint: 'Delivery cycles out of which one may run out.',
  otherLabel: 'One in',
  otherUse: 'Add it',
  outside: (floor: number, ceiling: number): string =>
    `Between 1 in ${quantity(oddsIn(floor))} and 1 in ${quantity(oddsIn(ceiling))}: the hospital’s floor and ceiling.`,
  cut: (capacity: number | null): string =>
    capacity === null
      ? 'The shelf is too small for some of these.'
      : `The shelf holds ${quantity(capacity)}, so some of these are cut to fit.`,
  /** What the chosen aim comes to; estimates. */
  once: (step: AimStep): string => {
    const runs = `At ${quantity(step.reorderPoint)} ${odds(step.cycleService)} runs out, ${onceIn(step.cycleService, step.cyclesPerYear)}`
    if (step.shortPerYear === null) return `${runs}.`
    const short = step.shortPerYear
    const many = short < 0.1 ? 'hardly any' : `about ${decimal(short, short < 10 ? 1 : 0)}`
    return `${runs}; ${many} a year would be asked for and not there.`
  },
  keptMeans: 'Kept: what stands on the shelf on average. Money: what holding that costs.',
  /** What so few data cannot tell. */
  limits: (step: AimStep, figures: Computed | null): string[] => {
    const said: string[] = []
    if (figures?.demand && !figures.demand.sufficient)
      said.push('There are few counts yet: every step keeps more than it would with many.')
    if (figures?.dataCarry != null && step.level > figures.dataCarry)
      said.push(
        `Use comes in lumps or runs: these counts alone could confirm aims up to 1 in ${quantity(oddsIn(figures.dataCarry))}; a higher one rests on the law.`,
      )
    if (step.yearsBetweenRunOuts !== null && step.yearsBetweenRunOuts >= 2)
      said.push('The record of one place cannot confirm so high an aim; look at the class as a whole.')
    return said
  },
  working: 'Working it out …',
  cannot: 'There are not enough counts to work this out. The aim can still be set; it is used as soon as there are.',
  reason: 'Reason',
  policyReference: 'Policy reference',
  reviewBy: 'Review by',
  set: (level: number, point: number | null): string =>
    point === null
      ? `Set 1 in ${quantity(oddsIn(level))}`
      : `Set 1 in ${quantity(oddsIn(level))}, reorder at ${quantity(point)}`,
  propose: (level: number, point: number | null): string =>
    point === null
      ? `Propose 1 in ${quantity(oddsIn(level))}`
      : `Propose 1 in ${quantity(oddsIn(level))}, reorder at ${quantity(point)}`,
  second: 'A second reviewer confirms before it counts.',
  reviewer: 'A reviewer decides before it counts.',
  saved: (level: number, point: number | null): string =>
    point === null ? `Set: ${odds(level)}.` : `Set: ${odds(level)}. Reorder point ${quantity(point)}.`,
  proposedSaved: (level: number): string => `Proposed: ${odds(level)}. Nothing changes until it is decided.`,
  // A person's name, or the role of somebody whose name is not shown here.
  waiting: (who: string, level: number): string =>
    `${who.charAt(0).toUpperCase()}${who.slice(1)} proposes ${odds(level)}`,
  waitingWhy: (reason: string, reference: string, reviewBy: string): string =>
    `${reason} · ${reference} · review by ${day(reviewBy)}`,
  own: 'You proposed this. A second person decides it.',
  approve: 'Approve',
  decline: 'Decline',
  note: 'Note',
  approved: 'Approved. The policy follows at once.',
  declined: 'Declined. Nothing changed.',
  end: 'End this aim',
  endTitle: 'End the aim set for this place?',
  endWhat: 'The aim of its class holds again. The record of this one is kept.',
  ended: 'Ended. The aim of its class holds again.',
  keep: 'Keep it',
  toBin: 'Its page',
  needReason: 'Say why, in a sentence.',
  needReference: 'Name the policy or decision this follows.',
  needReviewBy: 'Give a day after today, at most two years on.',
} as const
