import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { StretchFigures } from '#src/components/policy/demand-picture.ts'
import type { Computed, WhyPolicy } from '#src/components/policy/why-policy.ts'
import { dayCount, decimal, odds, oddsIn, percent, quantity } from './format.ts'
import { isWorkedOut, useWords } from './policy-why.ts'

// What went in ----------------------------------------------------------------------------------------------------

function deliveryWords(policy: WhyPolicy, c: Computed): string {
  const lead = dayCount(c.leadTime.meanDays)
  const spread = c.leadTime.sdDays > 0 ? `, give or take ${decimal(c.leadTime.sdDays)}` : ''
  const seen = policy.leadTimes?.seen ?? policy.input?.leadTime.observedDays?.length ?? 0
  return `${lead}${spread}, ${seen > 0 ? `${quantity(seen)} seen` : 'stated'}`
}

function inputRows(policy: WhyPolicy, c: Computed): { label: string; value: string }[] {
  const { input } = policy
  const rows = [
    { label: 'Use', value: c.demand ? useWords(c.demand.meanPerDay).replace('about ', '') : 'not known' },
    { label: 'Spread', value: c.demand?.dispersion != null ? `${decimal(c.demand.dispersion)} × chance` : 'not known' },
    {
      label: 'Counts',
      value: c.demand ? `${quantity(c.demand.intervals)} over ${quantity(Math.round(c.demand.days))} days` : 'none',
    },
    { label: 'Until that order', value: c.reviewPeriodDays > 0 ? dayCount(c.reviewPeriodDays) : 'no wait' },
    { label: 'Delivery', value: deliveryWords(policy, c) },
    { label: 'Has to last', value: dayCount(c.protectionDays) },
    { label: 'Aim', value: `1 in ${quantity(oddsIn(policy.target))} (${percent(policy.target)})` },
  ]
  if (input?.wastagePerDay) rows.splice(2, 0, { label: 'Wasted', value: `${decimal(input.wastagePerDay, 2)} a day` })
  if (input?.protectionExposureDays != null && decimal(input.protectionExposureDays) !== decimal(c.protectionDays))
    rows.splice(-1, 0, { label: 'As busy as', value: `${decimal(input.protectionExposureDays)} usual days` })
  if (input?.capacity != null) rows.push({ label: 'Shelf holds', value: quantity(input.capacity) })
  return rows
}

/** So many decimals of a percentage that two shares which differ also read differently. */
function decimalsFor(a: number, b: number): number {
  let digits = 2
  while (digits < 8 && decimal(a * 100, digits) === decimal(b * 100, digits)) digits += 1
  return digits
}

/** A term of the formula stays on one line. */
const unbroken = (term: string): string => term.replaceAll(' ', '\u00a0')

/** The formula with the values put in, on one line. */
function formula(figures: StretchFigures, c: Computed, aim: number): string {
  const digits = decimalsFor(figures.short ?? 0, aim)
  const part = (value: number): string => `${decimal(value * 100, digits)} %`
  const probability = (level: number, value: number): string => unbroken(`P(use ≤ ${quantity(level)}) = ${part(value)}`)
  const reached = probability(figures.level, figures.reached)
  const wanted = unbroken(part(aim))
  const chain =
    figures.short === null
      ? `${reached} ≥ ${wanted}`
      : `${probability(figures.level - 1, figures.short)} < ${wanted} ≤ ${reached}`
  if (!c.protectionDemand) return chain
  return `${decimal(c.protectionDemand.mean)} expected in ${dayCount(c.protectionDays)}; ${chain}`
}

// How it was worked out -------------------------------------------------------------------------------------------

const methodWords: Record<string, string> = {
  'negative-binomial-mixture': 'uneven use in whole units, with an allowance for few counts',
  student: 'smooth use, with an allowance for few counts',
  'gamma-poisson': 'chance use in whole units, with an allowance for few counts',
  normal: 'smooth use',
  poisson: 'chance use in whole units',
  'negative-binomial': 'uneven use in whole units',
  gamma: 'smooth use that reaches further up than down',
  lognormal: 'smooth use that reaches far up',
  bootstrap: 'the days on record, drawn again and again',
  empirical: 'the days on record as they are',
  entered: 'entered by a person',
}

const classWords: Record<NonNullable<BinPolicy['demandClass']>, string> = {
  smooth: 'It is used often and in even amounts (smooth).',
  erratic: 'It is used often, in amounts that differ much (erratic).',
  intermittent: 'It is used now and then, in even amounts (intermittent).',
  lumpy: 'It is used now and then, in amounts that differ much (lumpy).',
}

/** The shape of use in a stretch: the middle half, and to which side it leans. */
function shape(f: StretchFigures): string {
  const middle =
    f.quarter === f.threeQuarters
      ? `Half of such stretches or more use ${quantity(f.half)}`
      : `Half of such stretches use ${quantity(f.quarter)} to ${quantity(f.threeQuarters)}`
  const [up, down] = [f.nineTenths - f.half, f.half - f.tenth]
  const lean = up > 1.2 * down ? 'busy ones reach further up than quiet ones down' : 'busy and quiet ones reach as far'
  return `${middle}, one in ten ${quantity(f.nineTenths)} or more; ${lean}.`
}

function textbook(c: Computed, aim: number): string | null {
  if (!c.textbookNormal || c.computedReorderPoint === null) return null
  const { reorderPoint, achieved } = c.textbookNormal
  const asked = `the ${quantity(oddsIn(aim))} asked for`
  if (reorderPoint === c.computedReorderPoint) return `The textbook normal formula gives ${quantity(reorderPoint)} too.`
  const short = achieved < aim ? `, not 1 in ${asked}` : ''
  return `The textbook normal formula gives ${quantity(reorderPoint)}; with that ${odds(achieved)} would run out${short}.`
}

function savings(c: Computed): string | null {
  const units = c.forFewCounts
  if (units == null || units < 1) return null
  return `${quantity(units)} of it ${units === 1 ? 'is' : 'are'} kept only because there are few counts; many counts would save ${units === 1 ? 'it' : 'them'}.`
}

/** What the working rests on, in sentences. */
function workingNotes(policy: WhyPolicy, figures: StretchFigures | null): string[] {
  const c = policy.computed
  if (!isWorkedOut(c)) return []
  const notes = [
    `The law: ${methodWords[c.method] ?? c.method}.`,
    policy.demandClass ? classWords[policy.demandClass] : null,
    figures ? shape(figures) : null,
    textbook(c, policy.target),
    savings(c),
    c.dataCarry != null
      ? `These counts alone could confirm an aim up to 1 in ${quantity(oddsIn(c.dataCarry))}; beyond that it rests on the law.`
      : null,
  ]
  return notes.filter((words) => words !== null)
}

function rateRows(c: Computed | null): { label: string; value: string }[] {
  const rows: { label: string; value: string }[] = []
  if (c?.fillRate != null) rows.push({ label: 'Fill rate: units there when asked for', value: percent(c.fillRate) })
  if (c?.readyRate != null) rows.push({ label: 'Ready rate: time with some on the shelf', value: percent(c.readyRate) })
  return rows
}

/** Why an interval counts or not. */
const reasonWords: Record<string, string> = {
  'before-start': 'before the history begins',
  excluded: 'left out by a person',
  'rise-unexplained': 'more found than was recorded',
  'was-empty': 'nothing there to take',
  closed: 'closed',
  'too-old': 'over two years ago',
  merged: 'added to its neighbour across a miscount',
}

/** What went in, the formula, the picture and the working, in words. */
export const workingWords = {
  inputRows,
  inputs: 'What went in',
  formula,
  formulaTitle: 'As a formula',
  method: (code: string): string => methodWords[code] ?? code,
  workingNotes,
  rateRows,
  worked: 'How it was worked out',
  workedColumns: { label: 'Step', formula: 'With the figures put in', value: 'Result' },
  intervalsTitle: 'The stretches between counts it was worked out from',
  intervalColumns: { from: 'From', to: 'To', days: 'Days', used: 'Used', note: 'Note' },
  censored: 'found empty: at least this many',
  reason: (why: string | null, used: boolean): string | null =>
    why !== null ? (reasonWords[why] ?? why) : used ? null : 'left out',
  pictureTitle: (days: number, stretches: number): string =>
    `Use in ${dayCount(days)}, ${quantity(stretches)} times over`,
  pictureAlternative: (picture: StretchFigures['picture'], point: number): string =>
    `${quantity(picture.stretches)} stretches as dots by the number used; ${
      picture.beyond === 0 ? 'none' : quantity(picture.beyond)
    } of them ${picture.beyond === 1 ? 'needs' : 'need'} more than ${quantity(point)}.`,
  pictureColumns: {
    units: 'Used in the stretch',
    times: (stretches: number) => `Times in ${quantity(stretches)}`,
    enough: 'That many is enough',
  },
  pictureRange: (from: number, to: number): string =>
    from === to ? quantity(from) : `${quantity(from)} to ${quantity(to)}`,
  used: (unit: string): string => `${unit} used in the stretch`,
  textbookMark: (value: number): string => `textbook normal, ${quantity(value)}`,
  risk: (risk: number): string => (risk < 0.00005 ? 'hardly any' : `1 in ${quantity(oddsIn(1 - risk))}`),
  needsMore: 'needs more',
} as const
