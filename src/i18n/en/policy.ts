import type { Bin } from '#shared/contracts/bins.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import { dayCount, decimal, duration, odds, oddsIn, percent, quantity, signed } from './format.ts'

/** A computed policy as the page reads it; figures are absent where nothing was computed. */
export interface Computed {
  method: string
  reorderPoint: number | null
  parLevel: number | null
  orderQuantity: number | null
  safetyStock: number | null
  demand: {
    meanPerDay: number
    dispersion: number | null
    intervals: number
    days: number
    censoredIntervals: number
    excludedIntervals: number
    sufficient: boolean
  } | null
  leadTime: { meanDays: number; sdDays: number }
  reviewPeriodDays: number
  protectionDays: number
  achieved: number | null
  textbookNormal: { reorderPoint: number; achieved: number } | null
  warnings: string[]
}

/** Use in the unit people think in: a day, a week, a month or a quarter. */
export function useWords(perDay: number): string {
  if (!(perDay > 0)) return 'nothing so far'
  if (perDay >= 1) return `about ${decimal(perDay)} a day`
  if (perDay * 7 >= 1) return `about ${decimal(perDay * 7)} a week`
  if (perDay * 30 >= 1) return `about ${decimal(perDay * 30)} a month`
  return `about 1 in ${quantity(Math.round(1 / (perDay * 30)))} months`
}

const warningWords: Record<string, string> = {
  'no-data': 'There are no counts to learn from yet.',
  'few-intervals': 'There are few counts yet, so more is kept than would be needed with many.',
  pooled: 'Other places with this item helped, because this one has few counts.',
  'all-zero': 'Every count so far showed no use.',
  'all-censored': 'It was found empty at every count, so the true use is not known.',
  lumpy: 'It is used in lumps: many at once, then none for a while. The figure is rough.',
  autocorrelated: 'High use tends to follow high use. The figure may be too small in a busy spell.',
  trend: 'Use is rising or falling. The figure follows with a delay.',
  'stated-lead-time': 'How long a delivery takes is stated, not measured yet.',
  'count-overdue': 'The count is older than the rhythm of the room.',
  'planned-change': 'A planned change is part of it.',
  'shelf-cannot-hold': 'The shelf is too small for this aim.',
  'expiry-cap': 'Less is ordered at a time so that it is used before its date.',
  'minimum-order': 'The supplier’s minimum raises the order.',
  floor: 'A fixed minimum, set by a reviewer, holds it up.',
}

const causeWords: Record<string, string> = {
  count: 'after a count',
  'service-level': 'the aim changed',
  calendar: 'deliveries or order days changed',
  rhythm: 'the counting rhythm changed',
  mode: 'the way the room is kept changed',
  entered: 'entered by a person',
  accepted: 'a person agreed to the worked-out figure',
  nightly: 'worked out again at night',
  use: 'use since then has changed',
}

const waitWords: Record<string, string> = {
  'three-counts': 'It is lower, so it waits for three counts in a row that agree.',
  'larger-change': 'The difference is small, so nothing moves yet.',
  'a-person': 'It stands below what a person entered, so a person has to agree.',
}

const methodWords: Record<string, string> = {
  'negative-binomial-mixture': 'uneven use in whole units, with an allowance for few counts',
  student: 'smooth use, with an allowance for few counts',
  'gamma-poisson': 'chance use in whole units, with an allowance for few counts',
  normal: 'smooth use',
  poisson: 'chance use in whole units',
  'negative-binomial': 'uneven use in whole units',
  entered: 'entered by a person',
}

/** Where an aim comes from. */
export const sourceWords: Record<BinPolicy['serviceLevel']['source'], string> = {
  'bin-override': 'set for this place',
  'item-override': 'set for this item',
  class: 'the aim of its class',
  hospital: 'the hospital’s aim',
}

function stretchWords(c: Computed): string {
  const order = `An order takes about ${dayCount(c.leadTime.meanDays)}`
  const look = c.reviewPeriodDays > 0 ? ` and the next chance to order is ${dayCount(c.reviewPeriodDays)} later` : ''
  return `${order}${look}, so the shelf must last ${dayCount(c.protectionDays)}.`
}

function enoughWords(point: number, achieved: number | null): string {
  if (achieved === null) return ''
  const n = oddsIn(achieved)
  if (achieved >= 0.99995) return `In practically all such stretches ${quantity(point)} is enough.`
  return `In about ${quantity(n - 1)} of ${quantity(n)} such stretches ${quantity(point)} is enough.`
}

/** "Why 31?" in plain words. */
function why(place: string, point: number | null, policy: BinPolicy, computed: Computed | null): string[] {
  if (!computed || computed.method === 'entered' || !computed.demand) {
    return [
      point === null
        ? `Nobody has said yet when to reorder, and there are no counts to work it out from.`
        : `${quantity(point)} was entered by a person. There are not enough counts yet to work it out.`,
    ]
  }
  const inForce = point !== null && point === computed.reorderPoint
  const sentences = [`${place} uses ${useWords(computed.demand.meanPerDay)}. ${stretchWords(computed)}`]
  if (inForce) sentences.push(enoughWords(point, computed.achieved))
  else {
    const works = computed.reorderPoint === null ? '' : `It works out at ${quantity(computed.reorderPoint)}.`
    const holds =
      point === null ? '' : ` In force is ${quantity(point)}${policy.mode === 'calculated' ? '' : ', as entered'}.`
    sentences.push(works + holds)
  }
  sentences.push('This is an estimate; facility policy comes first.')
  return sentences.filter(Boolean)
}

function inputRows(policy: BinPolicy, c: Computed): { label: string; value: string }[] {
  const lead =
    c.leadTime.sdDays > 0
      ? `${dayCount(c.leadTime.meanDays)}, give or take ${decimal(c.leadTime.sdDays)}`
      : dayCount(c.leadTime.meanDays)
  const rows = [
    { label: 'Use', value: c.demand ? useWords(c.demand.meanPerDay).replace('about ', '') : 'not known' },
    { label: 'Spread', value: c.demand?.dispersion != null ? `${decimal(c.demand.dispersion)} × chance` : 'not known' },
    { label: 'Delivery', value: lead },
    { label: 'Next chance to order', value: c.reviewPeriodDays > 0 ? dayCount(c.reviewPeriodDays) : 'any time' },
    {
      label: 'Aim',
      value: `1 in ${quantity(oddsIn(policy.serviceLevel.target))} (${percent(policy.serviceLevel.target)})`,
    },
  ]
  if (c.demand)
    rows.push({
      label: 'Counts',
      value: `${quantity(c.demand.intervals)} over ${quantity(Math.round(c.demand.days))} days`,
    })
  return rows
}

export const policyWords = {
  useWords,
  why,
  inputRows,
  whyTitle: (point: number | null): string => (point === null ? 'Why no reorder point?' : `Why ${quantity(point)}?`),
  warning: (code: string): string | null => warningWords[code] ?? null,
  method: (code: string): string => methodWords[code] ?? code,
  textbook: (c: Computed): string | null => {
    if (!c.textbookNormal || c.reorderPoint === null) return null
    const { reorderPoint, achieved } = c.textbookNormal
    return `The textbook normal formula gives ${quantity(reorderPoint)}; ${odds(achieved)} would run out.`
  },
  worked: 'How it was worked out',
  workedColumns: { label: 'Step', formula: 'With the figures put in', value: 'Result' },
  intervalsTitle: 'The stretches between counts it was worked out from',
  intervalColumns: { from: 'From', to: 'To', days: 'Days', used: 'Used', note: 'Note' },
  censored: 'found empty: at least this many',
  leftOut: 'left out',
  pictureTitle: (days: number): string => `Use in ${dayCount(days)}, 200 times over`,
  pictureAlternative: (beyond: number, point: number): string =>
    `200 stretches as dots by the number used; ${quantity(beyond)} of them need more than ${quantity(point)}.`,
  pictureColumns: { units: 'Used in the stretch', times: 'Times in 200' },
  pictureRange: (from: number, to: number): string =>
    from === to ? quantity(from) : `${quantity(from)} to ${quantity(to)}`,
  used: (unit: string): string => `${unit} used in the stretch`,
  textbookMark: (value: number): string => `textbook normal, ${quantity(value)}`,
  beyond: (n: number): string => (n === 0 ? 'none of 200' : `${quantity(n)} in 200`),
  moved: 'How the point moved',
  since: (when: string): string => `In force since ${when}`,
  pending: (point: number): string => `Works out at ${quantity(point)} now`,
  waits: (code: string): string => waitWords[code] ?? `It waits: ${code}.`,
  because: (code: string): string => causeWords[code] ?? 'worked out anew',
  accept: 'Agree to it',
  accepted: 'Agreed. The worked-out figure is in force.',
  moves: (from: number | null | undefined, to: number | null): string =>
    from == null ? (to === null ? '—' : quantity(to)) : `${quantity(from)} → ${to === null ? '—' : quantity(to)}`,
  older: 'Older changes',
  cause: (what: string, units: number): string => `${causeWords[what] ?? 'worked out anew'}: ${signed(units)}`,
  aim: (level: number): string => `Aim: ${odds(level)} (${percent(level)})`,
  reviewBy: (when: string): string => `review by ${when}`,
  reason: 'Reason',
  entered: (point: number | null, par: number | null): string =>
    `Entered by hand: ${[point !== null && `reorder at ${quantity(point)}`, par !== null && `par ${quantity(par)}`].filter(Boolean).join(', ') || 'nothing'}`,
  propose: 'Change the aim',
  proposePlain: 'Propose another aim',
  proposed: (level: number, who: string): string =>
    `${who.charAt(0).toUpperCase()}${who.slice(1)} proposes ${odds(level)}`,
  levelTitle: 'Level over time',
  levelLegend: 'dots are counts, risers deliveries put away, hatching time below the line',
  levelAlternative: (from: string, to: string, outs: number): string =>
    `Level from ${from} to ${to}; run out ${outs === 0 ? 'never' : outs === 1 ? 'once' : `${outs} times`}.`,
  levelNothing: 'Nothing recorded in these weeks.',
  levelColumns: { when: 'When', what: 'What', quantity: 'Quantity', after: 'On hand after' },
  out: (hours: number): string => `empty, ${duration(hours * 60)}`,
  point: (value: number): string => `reorder line ${quantity(value)}`,
  enoughFor: (early: number, late: number): string =>
    early === late
      ? `enough for about ${dayCount(early)}`
      : `enough for ${decimal(early, 0)} to ${decimal(late, 0)} days`,
  positionWords: (bin: Bin): string =>
    [
      bin.reorderPoint === null ? 'no reorder point yet' : `reorder point ${quantity(bin.reorderPoint)}`,
      bin.onOrder > 0 ? `${quantity(bin.onOrder)} on order` : 'none on order',
      bin.parLevel !== null ? `par ${quantity(bin.parLevel)}` : null,
    ]
      .filter(Boolean)
      .join(', '),
} as const
