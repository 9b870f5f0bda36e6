import type { Bin } from '#shared/contracts/bins.ts'
import type { Room } from '#shared/contracts/catalogue.ts'
import type { Hospital } from '#shared/contracts/hospital.ts'
import type { Role } from '#shared/contracts/contract.ts'
import { binFigures } from '#src/components/gauge/bin-figures.ts'
import { gaugeShape } from '#src/components/gauge/gauge-geometry.ts'
import { binWord } from './common.ts'
import { ageOfCount, counted, daysAgo, dateOf, dueOn, quantity } from './format.ts'
import { gaugeWords } from './gauge.ts'

/** When and where words are said: "now" and the hospital's zone are given, never looked up. */
export interface Moment {
  now: string
  zone: string
}

/** The words of one list row: never more than three marks are drawn, the rest is here. */
export interface RowWords {
  name: string
  vital: boolean
  /** Left of the line, below the bar. */
  left: string | null
  /** Right of the line, beside the bar; the tone decides its colour. */
  beside: string | null
  besideTone: 'below' | 'plain'
  /** Right of the line, below the bar. */
  right: string | null
  rightTone: 'plain' | 'on-phone'
  /** Null: no count yet. */
  onHand: string | null
}

const isVital = (bin: Bin): boolean => bin.item?.ved === 'V'

function ageWords(bin: Bin, at: Moment): string | null {
  return bin.lastCount ? ageOfCount(daysAgo(bin.lastCount.effectiveAt, at.now, at.zone)) : null
}

/** When the next delivery comes, for the caption: "due Thu"; null when nothing is on its way or no day is known. */
function dueCaption(bin: Bin, at: Moment): string | null {
  if (bin.onOrder <= 0) return null
  if (bin.states.includes('late-order')) return 'delivery late'
  return bin.expectedOn ? `due ${dueOn(bin.expectedOn, dateOf(at.now, at.zone))}` : null
}

function overLine(bin: Bin): string | null {
  const { times } = gaugeShape(binFigures(bin), { width: 200, bar: 12 })
  return times === null ? null : gaugeWords.times(times)
}

/** Ward staff see facts: enough, order due, on its way, empty; the reorder point only on the place's own page. */
function wardBeside(bin: Bin): Pick<RowWords, 'beside' | 'besideTone'> {
  if (bin.lastCount === null) return { beside: gaugeWords.neverCounted, besideTone: 'plain' }
  if (bin.states.includes('empty')) return { beside: 'empty', besideTone: 'below' }
  if (bin.states.includes('below')) return { beside: bin.onOrder > 0 ? 'on its way' : 'order due', besideTone: 'below' }
  return { beside: null, besideTone: 'plain' }
}

function besideOf(bin: Bin, role: Role): Pick<RowWords, 'beside' | 'besideTone'> {
  if (role === 'nurse') return wardBeside(bin)
  const below = bin.lastCount !== null && bin.reorderPoint !== null && !bin.states.includes('count-first')
  return { beside: gaugeWords.beside(binFigures(bin)), besideTone: below ? 'below' : 'plain' }
}

function rightOf(bin: Bin, role: Role, at: Moment): string | null {
  if (bin.recordsDisagree) return 'records disagree, count it'
  if (bin.states.includes('count-first')) return gaugeWords.countFirst
  const today = dateOf(at.now, at.zone)
  if (role !== 'nurse' && bin.states.includes('empty')) return gaugeWords.empty(bin.onOrder, bin.expectedOn, today)
  if (bin.states.includes('late-order') && role !== 'nurse') return `${gaugeWords.onOrder(bin.onOrder)}, late`
  if (bin.held > 0) return gaugeWords.held(bin.held)
  if (bin.states.includes('count-overdue')) return ageWords(bin, at)
  if (role === 'nurse') {
    if (bin.lastCount === null) return null
    return dueCaption(bin, at) ?? (bin.states.includes('below') ? null : 'enough')
  }
  if (bin.onOrder > 0) return gaugeWords.onOrder(bin.onOrder)
  return overLine(bin)
}

function leftOf(bin: Bin, role: Role, at: Moment): string | null {
  if (role === 'nurse') return bin.states.includes('count-overdue') ? null : ageWords(bin, at)
  if (bin.reorderPoint === null) return bin.lastCount === null ? null : gaugeWords.noPoint
  return bin.reorderPoint === 0 ? gaugeWords.reorderWhenEmpty : gaugeWords.reorderAt(bin.reorderPoint)
}

/** All words of a bin's row, by the role that reads it. */
export function rowWords(bin: Bin, role: Role, at: Moment, more: { waiting?: boolean } = {}): RowWords {
  const right = more.waiting ? gaugeWords.onThisPhone : rightOf(bin, role, at)
  return {
    name: bin.item?.name ?? 'nothing assigned',
    vital: isVital(bin),
    left: leftOf(bin, role, at),
    ...besideOf(bin, role),
    right,
    rightTone: more.waiting ? 'on-phone' : 'plain',
    onHand: bin.lastCount === null ? null : quantity(bin.onHand),
  }
}

/** The row's caption in the narrow pane, where one line has to do. */
export function narrowCaption(words: RowWords, bin: Bin): string | null {
  if (bin.lastCount === null) return words.beside
  return words.right === 'enough' ? null : words.right
}

export const roomWords = {
  title: 'Rooms',
  walking: 'In walking order',
  lead: (below: number, bins: number, word: Hospital['binWord'] | undefined): string =>
    below === 0
      ? `All ${counted(bins, binWord(word))} above the line`
      : `${quantity(below)} of ${quantity(bins)} below`,
  belowOf: (below: number, bins: number): string => `${quantity(below)} of ${quantity(bins)} below`,
  allEnough: (bins: number, word: Hospital['binWord'] | undefined): string =>
    `${quantity(bins)} ${binWord(word, bins)}, none below the line`,
  neverCounted: (n: number): string => `${quantity(n)} never counted`,
  oldCounts: (n: number): string => counted(n, 'old count'),
  countFirst: (n: number): string => `${quantity(n)} to count first`,
  shelf: (bay: string, shelf: string): string =>
    [bay && `Bay ${bay}`, shelf && `shelf ${shelf}`].filter(Boolean).join(' · ') || 'No shelf given',
  countDue: (n: number, word: Hospital['binWord'] | undefined): string =>
    n > 0 ? `Count ${quantity(n)} due ${binWord(word, n)}` : 'Count this room',
  countThis: 'Count',
  find: 'Find an item or a code',
  fromPhone: (when: string): string => `As this phone read it ${when}. The shelf and the record may differ.`,
  noBins: (word: Hospital['binWord'] | undefined): string => `No ${binWord(word, 2)} in this room`,
  noBinsWhat: 'They are added under Hospital.',
  nothingFound: (q: string): string => `Nothing called “${q}” here`,
  nothingFoundWhat: 'Search by item, item code or the code on the label.',
  choose: (word: Hospital['binWord'] | undefined): string => `Choose a ${binWord(word)} on the left.`,
  rhythm: (room: Room): string =>
    room.countEveryDays === 1 ? 'counted daily' : `counted every ${quantity(room.countEveryDays)} days`,
  strip: (room: string, bins: number, below: number): string =>
    `${room}: ${quantity(bins)} bars on the shared line, ${quantity(below)} of them below it.`,
} as const

export const binPageWords = {
  countedAt: (when: string): string => `counted ${when}`,
  nothingAssigned: 'No item here',
  order: 'Order',
  onHand: (bin: Bin): string =>
    bin.lastCount === null ? gaugeWords.noCount : `${quantity(bin.onHand)} ${gaugeWords.onHand}`,
  capacity: (units: number): string => `holds ${quantity(units)}`,
} as const
