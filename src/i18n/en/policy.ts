import type { Bin } from '#shared/contracts/bins.ts'
import type { BinPolicy, CauseOfMove } from '#shared/contracts/policy.ts'
import { dayCount, decimal, duration, odds, percent, quantity, signed } from './format.ts'

export type { Computed } from '#src/components/policy/why-policy.ts'
export * from './policy-learning.ts'
export * from './policy-why.ts'
export * from './policy-working.ts'

const causeWords: Record<string, string> = {
  count: 'after a count',
  'service-level': 'the aim changed',
  calendar: 'deliveries or order days changed',
  rhythm: 'the counting rhythm changed',
  mode: 'the way the room is kept changed',
  'mode-vital': 'the way the room is kept changed',
  entered: 'entered by a person',
  accepted: 'a person agreed to the worked-out figure',
  nightly: 'worked out again at night',
  'planned-change': 'a planned change',
  exclusion: 'a stretch was left out or taken in again',
  'like-wards': 'what like wards tell changed',
}

/** "counts every 3 days instead of daily": the second time only what differs. */
const insteadOf = (
  part: CauseOfMove,
  now: (days: number) => string,
  before: (days: number) => string,
  plain: string,
): string =>
  part.from === undefined || part.to === undefined ? plain : `${now(part.to)} instead of ${before(part.from)}`

const everyDays = (days: number): string => (decimal(days) === '1' ? 'daily' : `every ${dayCount(days)}`)

/** Parts of a move, before their units: "use +3, counts every 3 days instead of daily +4". */
const partWords: Record<string, (part: CauseOfMove) => string> = {
  use: () => 'use',
  rhythm: (part) => insteadOf(part, (days) => `counts ${everyDays(days)}`, everyDays, 'counting rhythm'),
  days: (part) => insteadOf(part, (days) => `${dayCount(days)} to cover`, dayCount, 'days to cover'),
  weekdays: () => 'weekdays in the days to cover',
  delivery: () => 'deliveries',
  'planned-change': () => 'planned change',
  'like-wards': () => 'like wards',
  aim: () => 'the aim',
  limits: () => 'shelf, pack or fixed minimum',
  entered: () => 'worked out instead of entered',
}

const waitWords: Record<string, string> = {
  'three-counts': 'It is lower, so it waits for three counts in a row that agree.',
  'larger-change': 'The difference is small, so nothing moves yet.',
}

/** Whom a figure below an entered level waits for. */
const waitsForWhom = (bin: Bin): string =>
  bin.item?.ved === 'V'
    ? 'It stands beside what a person entered; for a vital item it waits for the reviewer.'
    : 'It stands beside what a person entered; it waits for a coordinator or a reviewer to agree.'

/** Where an aim comes from. */
export const sourceWords: Record<BinPolicy['serviceLevel']['source'], string> = {
  'bin-override': 'set for this place',
  'item-override': 'set for this item',
  class: 'the aim of its class',
  hospital: 'the hospital’s aim',
}

export const policyWords = {
  moved: 'How the point moved',
  since: (when: string): string => `In force since ${when}`,
  pending: (point: number): string => `Works out at ${quantity(point)} now`,
  waits: (code: string, bin: Bin): string => waitWords[code] ?? waitsForWhom(bin),
  because: (code: string): string => causeWords[code] ?? 'worked out anew',
  accept: 'Agree to it',
  accepted: 'Agreed. The worked-out figure is in force.',
  moves: (from: number | null | undefined, to: number | null): string =>
    from == null ? (to === null ? '—' : quantity(to)) : `${quantity(from)} → ${to === null ? '—' : quantity(to)}`,
  older: 'Older changes',
  causes: (causes: readonly CauseOfMove[]): string =>
    causes.map((part) => `${partWords[part.what]?.(part) ?? 'other figures'} ${signed(part.units)}`).join(', '),
  countsKept: ({ kept, of }: { kept: number; of: number }): string =>
    `Counts kept: ${quantity(kept)} of ${quantity(of)}`,
  countsKeptWhat: 'planned counts of late that came in time',
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
