import type { LastYear, PlannedChange, PlannedChangeKind } from '#shared/contracts/planned-changes.ts'
import { counted, day, decimal, quantity } from './format.ts'
import { hospitalWords } from './hospital.ts'

type State = PlannedChange['state']

const kindWords: Record<PlannedChangeKind, { label: string; hint: string }> = {
  factor: { label: 'Use times a factor', hint: 'More or less of everything, as in winter or a holiday.' },
  cases: { label: 'So many units for each case', hint: 'A new list, a clinic: extra use on top of the usual.' },
  closed: { label: 'Closed', hint: 'Nothing is used, counted or delivered there.' },
}

const stateWords: Record<State, string> = { now: 'Now', ahead: 'Ahead', past: 'Past', 'taken-back': 'Taken back' }

function what(change: PlannedChange): string {
  if (change.kind === 'closed') return 'closed'
  if (change.kind === 'factor') return `use times ${decimal(change.factor ?? 1, 2)}`
  const days = change.weekdays ? ` on ${hospitalWords.daysOf(change.weekdays)}` : ' every day'
  const cases = change.casesPerDay ?? 0
  const each = decimal(change.unitsPerCase ?? 0, 2)
  return `${each} for each case, ${decimal(cases, 2)} ${cases === 1 ? 'case' : 'cases'}${days}`
}

const span = (change: Pick<PlannedChange, 'startsOn' | 'endsOn'>): string => {
  if (change.endsOn === null) return `from ${day(change.startsOn)} until further notice`
  if (change.startsOn === change.endsOn) return day(change.startsOn)
  const sameYear = change.startsOn.slice(0, 4) === change.endsOn.slice(0, 4)
  const from = sameYear ? day(change.startsOn).replace(/ [0-9]+$/, '') : day(change.startsOn)
  return `${from} to ${day(change.endsOn)}`
}

/** What a change does to counts, orders and reorder points, by where it stands. */
function effect(change: Pick<PlannedChange, 'kind' | 'state' | 'endsOn'>): string {
  const { kind, state } = change
  if (state === 'taken-back') return 'It counts for nothing. It stays on record.'
  if (kind === 'closed') {
    if (state === 'past') return 'Its days are left out of what is learnt.'
    const reopens = change.endsOn === null ? '' : ' Orders come back in time for the reopening.'
    return `No counts are due and nothing is flagged while it is closed.${reopens}`
  }
  if (state === 'past') return 'Its counts are read with it in mind, so later levels do not grow or shrink by it.'
  if (state === 'ahead') return 'Reorder points follow from one protection time ahead.'
  return `Reorder points follow it now${change.endsOn === null ? '' : ', and go back to the usual before it ends'}.`
}

/** Planned changes of use, and closures. */
export const plannedWords = {
  title: 'Planned changes',
  what: 'busier or quieter times, new lists, closures',
  lead: 'What you know and the counts cannot: busier weeks, a new list, a closed ward.',
  add: 'Plan a change',
  newTitle: 'New planned change',
  none: 'Nothing is planned',
  noneWhat:
    'Plan what is known ahead: a busy season, an extra list, a ward that closes. Reorder points follow in time and what was used then does not mislead later levels.',
  noneAll: 'Nothing was planned yet',
  showAll: 'With past ones and those taken back',
  states: stateWords,
  kinds: kindWords,
  of: what,
  span,
  effect,
  wholeHospital: 'The whole hospital',
  everyItem: 'every item there',
  items: (names: readonly string[]): string =>
    names.length === 0
      ? plannedWords.everyItem
      : names.length <= 3
        ? names.join(', ')
        : `${names.slice(0, 2).join(', ')} and ${quantity(names.length - 2)} more`,
  about: (places: number): string => counted(places, 'place'),
  by: (name: string): string => (name ? `Planned by ${name}.` : ''),
  seen: (change: Pick<PlannedChange, 'factor' | 'seen'>): string | null => {
    const { seen, factor } = change
    if (!seen || factor === null) return null
    const used = `used ${decimal(seen.used, 2)}`
    if (seen.factor === null) return `entered ${decimal(factor, 2)}, nothing seen yet, ${used}`
    const stretches = counted(seen.intervals, 'stretch', 'stretches')
    return `entered ${decimal(factor, 2)}, seen ${decimal(seen.factor, 2)} from ${stretches}, ${used}`
  },
  seenWhat: 'The more counts fall into it, the more what was seen weighs against what was entered.',
  fields: {
    name: { label: 'Name', hint: 'Such as Winter pressure, or Ward refit.' },
    place: { label: 'Where' },
    items: { label: 'Which items', hint: 'Search and add. None: every item there.' },
    kind: { label: 'What changes' },
    factor: { label: 'Use times', hint: '2 is twice the usual, 0.5 is half of it.' },
    unitsPerCase: { label: 'Units for each case' },
    casesPerDay: { label: 'Cases a day' },
    weekdays: { label: 'Days on which the cases fall', hint: 'None ticked: every day.' },
    startsOn: { label: 'First day' },
    endsOn: { label: 'Last day' },
    openEnd: { label: 'Until further notice' },
    reason: { label: 'Reason', hint: 'Others read it. Do not enter patient names, numbers or dates of birth.' },
  },
  roomIn: (room: string, ward: string): string => (room === ward ? room : `${room}, ${ward}`),
  allOfWard: (ward: string): string => `${ward}, all its rooms`,
  needName: 'cannot be empty',
  needDay: 'choose a day',
  needEnd: 'choose a day, or tick “until further notice”',
  number: 'a number, such as 1.5',
  lastYear: (found: LastYear): string =>
    found.factor === null
      ? 'The same days last year have too few counts to compare with.'
      : `The same days last year: ${decimal(found.factor, 2)} times the use of the weeks before (from ${counted(found.intervals, 'stretch', 'stretches')}).`,
  lastYearAllItems: 'All items there are taken together.',
  take: (factor: string): string => `Take ${factor}`,
  save: 'Save',
  plan: 'Plan it',
  planned: 'Planned. The levels it touches are worked out anew.',
  saved: 'Saved. The levels it touches are worked out anew.',
  takeBack: 'Take back',
  takeBackTitle: (name: string): string => `Take back ${name}?`,
  takeBackWhat: 'It will not happen, or did not. It counts for nothing from now on and stays on record.',
  takenBack: 'Taken back. The levels it touched are worked out anew.',
  decided: 'It was taken back and cannot be changed. Plan a new one instead.',
} as const
