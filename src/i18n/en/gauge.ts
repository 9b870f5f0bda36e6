import { DateTime } from 'luxon'
import type { Bin } from '#shared/contracts/bins.ts'
import type { GaugeFigures } from '#src/components/gauge/gauge-geometry.ts'
import { ageOfCount, dateOf, dueOn, quantity, shortDay } from './format.ts'

/** Where days are said: the hospital's zone. */
interface Zoned {
  zone: string
}

/** Units below the reorder point; 0 when at or above it. */
export const underOf = (figures: Pick<GaugeFigures, 'onHand' | 'onOrder' | 'reorderPoint'>): number =>
  figures.reorderPoint === null || figures.onHand === null
    ? 0
    : Math.max(0, figures.reorderPoint - figures.onHand - figures.onOrder)

const isAtPoint = (f: GaugeFigures): boolean =>
  f.reorderPoint !== null && f.onHand !== null && f.onHand + f.onOrder === f.reorderPoint

/** "Thu 23 Dec": a day people plan for, with both of its names. */
export const plannedDay = (iso: string, at: Zoned): string =>
  DateTime.fromISO(iso, { zone: at.zone }).setLocale('en-GB').toFormat('ccc d LLL')

/** The words of the shared line, for lists, pages and the text alternative. */
export const gaugeWords = {
  reorderLine: 'reorder line',
  under: (units: number): string => `${quantity(units)} under`,
  atPoint: 'at its point',
  onHand: 'on hand',
  noCount: 'no count yet',
  neverCounted: 'never counted',
  noPoint: 'no reorder point yet',
  countFirst: 'count first',
  vital: 'vital',
  onThisPhone: 'on this phone',
  held: (units: number): string => `${quantity(units)} held`,
  onOrder: (units: number): string => `+${quantity(units)} on order`,
  par: (units: number): string => `par ${quantity(units)}`,
  reorderAt: (units: number): string => `reorder at ${quantity(units)}`,
  reorderWhenEmpty: 'reorder when empty',
  /** Past twice the line, where the bar is cut. */
  times: (ratio: number): string =>
    ratio >= 3 ? `over ${quantity(Math.floor(ratio))} times the line` : 'over twice the line',
  counted: (days: number): string => ageOfCount(days),
  empty: (onOrder: number, expectedOn: string | null, today: string): string =>
    onOrder > 0 ? `Empty, ${quantity(onOrder)} due${expectedOn ? ` ${dueOn(expectedOn, today)}` : ''}` : 'Empty',
  /** A planned closure: "closed until 3 May". */
  closed: (until: string | null, at: Zoned): string =>
    until === null ? 'closed until further notice' : `closed until ${shortDay(dateOf(until, at.zone))}`,
  /** What to have before a holiday: "42 by Thu 23 Dec for Christmas". */
  gap: (gap: NonNullable<Bin['gap']>, at: Zoned): string =>
    `${quantity(gap.level)} by ${plannedDay(gap.orderBy, at)} for ${gap.name}`,
  /** What holds of a place for a time only; null on an ordinary day. */
  passing: (bin: Pick<Bin, 'closed' | 'gap'>, at: Zoned): string | null => {
    if (bin.closed) return gaugeWords.closed(bin.closed.until, at)
    return bin.gap ? gaugeWords.gap(bin.gap, at) : null
  },
  usual: (from: number, to: number): string => `usual ${quantity(from)} to ${quantity(to)}`,

  /** What stands right of the line: only ever there when the bar does not reach it. */
  beside(figures: GaugeFigures): string | null {
    if (figures.onHand === null) return gaugeWords.neverCounted
    if (figures.reorderPoint === null) return gaugeWords.noPoint
    // By the record its bar passes the line, so these words have no room here.
    if (figures.countFirst || figures.closed) return null
    const under = underOf(figures)
    if (under > 0) return gaugeWords.under(under)
    return isAtPoint(figures) ? gaugeWords.atPoint : null
  },

  /** The whole gauge in one sentence: "14 on hand, none on order, reorder point 20, 6 under". */
  alternative(figures: GaugeFigures): string {
    if (figures.onHand === null) {
      const point =
        figures.reorderPoint === null ? 'no reorder point' : `reorder point ${quantity(figures.reorderPoint)}`
      return `never counted, ${point}`
    }
    const parts = [
      `${quantity(figures.onHand)} on hand`,
      figures.onOrder > 0 ? `${quantity(figures.onOrder)} on order` : 'none on order',
      figures.reorderPoint === null ? 'no reorder point yet' : `reorder point ${quantity(figures.reorderPoint)}`,
    ]
    const under = figures.closed ? 0 : underOf(figures)
    if (under > 0) parts.push(gaugeWords.under(under))
    else if (!figures.closed && isAtPoint(figures)) parts.push(gaugeWords.atPoint)
    if (figures.closed) parts.push('closed')
    if (figures.holiday != null) parts.push(`${quantity(figures.holiday)} before the holidays`)
    if (figures.held) parts.push(gaugeWords.held(figures.held))
    if (figures.countFirst) parts.push(gaugeWords.countFirst)
    if (figures.old) parts.push('old count')
    if (figures.waiting) parts.push(gaugeWords.onThisPhone)
    return parts.join(', ')
  },
} as const
