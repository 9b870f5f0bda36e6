import type { TwoBinSize } from '#shared/policy/two-bin.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { Computed, WhyPolicy } from '#src/components/policy/why-policy.ts'
import type { Moment } from './catalogue.ts'
import { clock, counted, day, dayCount, decimal, near, odds, oddsIn, onceIn, quantity } from './format.ts'
import { plannedDay } from './gauge.ts'

/** Use in the unit people think in: a day, a week, a month or a quarter. */
export function useWords(perDay: number): string {
  if (!(perDay > 0)) return 'nothing so far'
  if (perDay >= 1) return `about ${decimal(perDay)} a day`
  if (perDay * 7 >= 1) return `about ${decimal(perDay * 7)} a week`
  if (perDay * 30 >= 1) return `about ${decimal(perDay * 30)} a month`
  return `about 1 in ${quantity(Math.round(1 / (perDay * 30)))} months`
}

const capital = (text: string): string => `${text.charAt(0).toUpperCase()}${text.slice(1)}`
const atAim = (aim: number): string => `one in ${quantity(oddsIn(aim))}`
const howMany = (units: number): string =>
  units < 1 ? 'fewer than 1' : units < 10 ? `about ${decimal(units)}` : `about ${quantity(Math.round(units))}`

// Plain words -----------------------------------------------------------------------------------------------------

function goWords(perDay: number): string {
  return perDay > 0
    ? `${capital(useWords(perDay))} ${decimal(perDay) === '1' ? 'goes' : 'go'} from this place.`
    : 'Nothing has gone from this place so far.'
}

function chanceWords(p: NonNullable<BinPolicy['protection']>, at: Moment): string[] {
  const first =
    p.firstOrderBy > at.now
      ? `Ordered by ${near(p.firstOrderBy, at.now, at.zone)}, it is here on ${plannedDay(p.firstArrival, at)}.`
      : `Ordered now, it is here about ${plannedDay(p.firstArrival, at)}.`
  const next = `${plannedDay(p.nextOrderBy, at)} ${clock(p.nextOrderBy, at.zone)}`
  return [first, `The chance after that, ${next}, lands on ${plannedDay(p.nextArrival, at)}.`]
}

/** The same without dates, where only lengths are known. */
function lengthWords(c: Computed): string[] {
  const count =
    c.reviewPeriodDays > 0 ? `The chance after the next is ${dayCount(c.reviewPeriodDays)} after a count` : ''
  const lead = `an order takes about ${dayCount(c.leadTime.meanDays)}`
  return [`${count ? `${count}, and ${lead}` : capital(lead)}: it has to last ${dayCount(c.protectionDays)}.`]
}

function stretchWords(c: Computed, aim: number): string {
  if (c.protectionDemand === null || c.computedReorderPoint === null) return ''
  const usual = howMany(c.protectionDemand.mean)
  const bad = quantity(c.computedReorderPoint)
  return `From the last count until then ${usual} go; in a bad stretch, ${atAim(aim)}, as many as ${bad}.`
}

/** What stands between the level that meets the aim and the figure; null where nothing does. */
function limitWords({ input }: WhyPolicy, c: Computed): string | null {
  if (c.reorderPoint === c.computedReorderPoint) return null
  if (c.warnings.includes('floor')) return 'With the fixed minimum:'
  return input?.capacity == null ? null : `With one pack coming, ${quantity(input.capacity)} fit on the shelf:`
}

function soWords(policy: WhyPolicy, c: Computed): string {
  const { reorderPoint: point } = policy
  if (c.reorderPoint === null) return ''
  const limit = limitWords(policy, c)
  if (point === c.reorderPoint) return `${limit ?? 'So:'} order at ${quantity(point)}.`
  const works = `${limit ? `${limit} it` : 'That'} works out at ${quantity(c.reorderPoint)}.`
  if (point === null) return works
  if (policy.mode !== 'calculated') return `${works} In force is ${quantity(point)}, as entered.`
  return `${works} In force is ${quantity(point)} until that is settled.`
}

export const isWorkedOut = (c: Computed | null): c is Computed & { demand: NonNullable<Computed['demand']> } =>
  c !== null && c.method !== 'entered' && c.demand !== null

/** "Why 31?" in plain words, a sentence each; "estimate" once. */
function plain(policy: WhyPolicy, at: Moment): string[] {
  const { computed, reorderPoint: point } = policy
  if (!isWorkedOut(computed)) {
    return [
      point === null
        ? 'Nobody has said yet when to reorder, and there are no counts to work it out from.'
        : `${quantity(point)} was entered by a person. There are not enough counts yet to work it out.`,
    ]
  }
  return [
    goWords(computed.demand.meanPerDay),
    ...(policy.protection ? chanceWords(policy.protection, at) : lengthWords(computed)),
    stretchWords(computed, policy.target),
    soWords(policy, computed),
    'This is an estimate; facility policy comes first.',
  ].filter(Boolean)
}

// What else holds -------------------------------------------------------------------------------------------------

const warningWords: Record<string, string> = {
  'no-data': 'There are no counts to learn from yet.',
  'few-intervals': 'There are few counts yet, so more is kept than would be needed with many.',
  'all-zero': 'Every count so far showed no use.',
  'all-censored': 'It was found empty at every count, so the true use is not known.',
  lumpy: 'It is used in lumps: many at once, then none for a while. The figure is rough.',
  autocorrelated: 'High use tends to follow high use. The figure may be too small in a busy spell.',
  trend: 'Use is rising or falling. The figure follows with a delay.',
  'expiry-cap': 'Less is ordered at a time so that it is used before its date.',
  'minimum-order': 'The supplier’s minimum raises the order.',
}

const share = (part: number): string => `${quantity(Math.round(part * 100))}\u00a0%`

/** How a change moves use: "by a half", as the hospital entered it and as the counts show it. */
function factorWords(change: BinPolicy['changes'][number]): string {
  const times = (factor: number): string => (factor >= 1 ? `${share(factor - 1)} more` : `${share(1 - factor)} less`)
  if (change.entered === null) return ''
  const seen = change.seen === null ? '' : `; the counts show ${times(change.seen)}`
  return `, planned as ${times(change.entered)}${seen}`
}

function changeWords(change: BinPolicy['changes'][number]): string {
  const from = day(change.startsOn)
  const span = change.endsOn === null ? `from ${from} until further notice` : `from ${from} to ${day(change.endsOn)}`
  if (change.kind === 'closed') return `“${change.name}”: closed ${span}; no use is expected then.`
  const how = change.kind === 'factor' ? factorWords(change) : ', by the cases planned'
  return `“${change.name}” ${span} is part of it${how}.`
}

/** Below this share of difference the days ahead are like any others. */
const SAME_DAYS = 0.05

/** Where no change is planned, days differ only by how use spreads over the week. */
function weekdayWords({ input }: WhyPolicy, c: Computed): string | null {
  const busy = input?.protectionExposureDays
  if (busy == null || !(c.protectionDays > 0) || Math.abs(busy / c.protectionDays - 1) < SAME_DAYS) return null
  const how = busy > c.protectionDays ? 'busier' : 'quieter'
  return `The weekdays until then are ${how} than most: they count as ${dayCount(busy)}.`
}

function poolWords(pool: WhyPolicy['pool']): string | null {
  if (!pool) return null
  const wards = pool.wards.filter((ward) => !ward.own && !ward.leftOut).length
  if (pool.basis === 'category' || pool.ownShare === null) return 'Items of its kind tell how uneven its use is.'
  const others = `${counted(wards, 'like ward')} ${share(1 - pool.ownShare)}`
  return `The counts here weigh ${share(pool.ownShare)}, ${others}.`
}

function shelfWords(c: Computed): string {
  if (c.shelfCarries == null) return 'The shelf is too small for this aim.'
  return `The shelf is too small for this aim: what fits lets ${odds(c.shelfCarries)} run out.`
}

function holdsOf(policy: WhyPolicy, c: Computed): string | null {
  const { reorderPoint: point, entered, input } = policy
  if (point !== null && entered === point && c.reorderPoint !== point)
    return `${quantity(entered)} was entered by a person and holds.`
  if (c.warnings.includes('floor') && input?.pinnedFloor != null)
    return `A fixed minimum of ${quantity(input.pinnedFloor)}, set by a reviewer, holds it up.`
  return null
}

/** One sentence for each thing that bears on the figure, only where it does. */
function bearing(policy: WhyPolicy, bin: Bin, at: Moment): string[] {
  const { computed } = policy
  if (!computed) return []
  const has = (code: string): boolean => (computed.warnings as string[]).includes(code)
  const overdue = bin.states.includes('count-overdue') || has('count-overdue')
  const said = [
    overdue ? 'The count is overdue; each further day raises the figure until somebody counts.' : null,
    ...policy.changes.map(changeWords),
    policy.changes.length === 0 ? weekdayWords(policy, computed) : null,
    bin.gap ? gapWords(bin.gap, at) : null,
    poolWords(policy.pool) ?? (has('pooled') ? 'Like wards helped, because there are few counts here.' : null),
    has('shelf-cannot-hold') ? shelfWords(computed) : null,
    holdsOf(policy, computed),
    ...computed.warnings.map((code) => warningWords[code] ?? null),
  ]
  return said.filter((words) => words !== null)
}

function gapWords(gap: NonNullable<Bin['gap']>, at: Moment): string {
  const by = `${plannedDay(gap.orderBy, at)}, ${clock(gap.orderBy, at.zone)}`
  return `Around “${gap.name}” deliveries stand still: have ${quantity(gap.level)} here by the order of ${by}.`
}

/** Sizes of a place kept as two bins; the front one's emptying is the order. */
function twoBinWords(size: TwoBinSize, bin: Bin): string {
  const sizes = size.equal
    ? `${quantity(size.perBin)} in each`
    : `${quantity(size.front)} in front and ${quantity(size.reserve)} in reserve`
  const room =
    size.fits || bin.capacity === null
      ? ''
      : ` Together they need room for ${quantity(size.total)}; ${quantity(bin.capacity)} fit.`
  return `As two bins it works out at ${sizes}, ordered when the front one is empty.${room}`
}

// Odds ------------------------------------------------------------------------------------------------------------

/**
 * How often it runs out at the figure in force, at the worked-out one where that differs, and on what it rests; empty
 * where nothing was worked out. `sure`: the chance that one cycle does not run out with the figure in force.
 */
function oddsWords(policy: WhyPolicy, sure: number | null, cycles: number | null): string[] {
  const { computed: c, reorderPoint: point } = policy
  if (!isWorkedOut(c) || c.achieved === null || c.reorderPoint === null || policy.input?.serviceMeasure === 'fill')
    return []
  const inForce = point !== null && sure !== null && point !== c.reorderPoint
  const [level, chance] = inForce ? [point, sure] : [c.reorderPoint, c.achieved]
  const years = cycles === null ? '' : `; this place ${onceIn(chance, cycles)}`
  return [
    `At ${quantity(level)} ${odds(chance)} runs out${years}.`,
    ...(inForce ? [`At the ${quantity(c.reorderPoint)} worked out it would be ${odds(c.achieved)}.`] : []),
    'That holds if counts keep their rhythm, deliveries come as before and use does not change.',
  ]
}

export const whyWords = {
  title: (point: number | null): string => (point === null ? 'Why no reorder point?' : `Why ${quantity(point)}?`),
  plain,
  bearing,
  twoBin: twoBinWords,
  odds: oddsWords,
  onPhone: 'Worked out on this phone from the figures it keeps; dates of deliveries need the record.',
} as const
