import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { Moment } from './catalogue.ts'
import { dateOf, day, decimal, quantity, shortDay } from './format.ts'
import { useWords } from './policy-why.ts'

type Question = BinPolicy['questions'][number]
type Exclusion = BinPolicy['exclusions'][number]

const capital = (text: string): string => `${text.charAt(0).toUpperCase()}${text.slice(1)}`

/** "between 3 and 10 May", "between 28 Apr and 2 May", "on 3 May"; `said` says the last day. */
function between(from: string, to: string, at: Moment, said = shortDay): string {
  const [a, b] = [dateOf(from, at.zone), dateOf(to, at.zone)]
  if (a === b) return `on ${said(a)}`
  const sameMonth = a.slice(0, 7) === b.slice(0, 7)
  return `between ${sameMonth ? Number(a.slice(8)) : shortDay(a)} and ${said(b)}`
}

/** What a person is asked about single stretches, and what is left out by a person. */
export const learningWords = {
  questionTitle: (n: number): string => (n === 1 ? 'An unusual stretch' : `${quantity(n)} unusual stretches`),
  question: (q: Question, at: Moment): string =>
    `${capital(between(q.from, q.to, at))} ${quantity(q.quantity)} went, about ${decimal(q.expected, q.expected < 10 ? 1 : 0)} would be usual. What was it?`,
  questionLater: 'It counts until somebody says what it was: a coordinator, a reviewer or an administrator.',
  answers: { excluded: 'A one-off event', typing: 'A typing error', real: 'Real use' },
  answerNotes: {
    excluded: 'That stretch is left out. Say what happened, so that others can judge it.',
    real: 'It counts on and is not asked about again. Say what it was.',
  },
  typing: (q: Question, at: Moment): string =>
    `Then the count of ${shortDay(dateOf(q.to, at.zone))} or the one before it is wrong. Compare both in the record below and count the place again, so that its level is right from now on. Leave the stretch out, so that the wrong number teaches nothing.`,
  typingReason: 'Typing error in a count',
  toLedger: 'Show the count',
  leaveOut: 'Leave it out',
  keep: 'It counts on',
  reason: 'Reason',
  reasonHint: 'No patient names, numbers or dates of birth.',
  needReason: 'Say why, in a sentence.',

  said: {
    excluded: 'Left out. The figures are worked out anew without it.',
    real: 'Noted as real use. It counts on.',
    ended: 'Ended. The figures are worked out anew.',
    started: 'The history starts on that day now. The figures are worked out anew.',
    ward: (leftOut: boolean, name: string): string =>
      `${name} is ${leftOut ? 'left out' : 'taken in again'}. The figures are worked out anew.`,
  },

  outTitle: 'Left out of the counts',
  outNone: 'Nothing is left out; every stretch counts.',
  out: (e: Exclusion, at: Moment): string => {
    if (e.kind === 'history-start') return `History from ${day(dateOf(e.from, at.zone))} on`
    const span = capital(between(e.from, e.to ?? e.from, at, day))
    return e.kind === 'real' ? `${span}: real use, counts` : `${span}: left out`
  },
  outBy: (e: Exclusion, at: Moment): string => `${e.reason} · ${e.byName}, ${day(dateOf(e.at, at.zone))}`,
  endOf: (kind: Exclusion['kind']): string =>
    ({ excluded: 'Let it count again', 'history-start': 'Use the whole history', real: 'Ask again' })[kind],
  endNamed: (e: Exclusion, at: Moment): string => `${learningWords.endOf(e.kind)}: ${learningWords.out(e, at)}`,
  start: 'Start the history anew',
  startWhat:
    'Counts before that day tell nothing any more, for instance since the ward does other work. They stay on record.',
  startOn: 'From',
  needStart: 'Give a day up to today.',
  startDo: 'Start from that day',

  wardsTitle: 'Like wards',
  wardsLead: (pool: NonNullable<BinPolicy['pool']>): string => {
    if (pool.basis === 'category') return 'They keep items of the same kind and tell how uneven their use is.'
    if (pool.ownShare === null) return 'They keep the same item.'
    const own = Math.round(pool.ownShare * 100)
    return `They keep the same item and help as long as there are few counts here: the counts here weigh ${own} %, like wards ${100 - own} %.`
  },
  wardsHead: 'Use in each ward',
  wardsLine: (perDay: number): string => `here, ${useWords(perDay).replace('about ', '')}`,
  wardUse: (perDay: number): string => useWords(perDay).replace('about ', ''),
  wardOwn: 'this place',
  wardOut: 'left out',
  wardLeave: 'Leave out',
  wardTake: 'Take in again',
  wardNamed: (leftOut: boolean, name: string): string =>
    `${leftOut ? learningWords.wardTake : learningWords.wardLeave}: ${name}`,

  stoppedTitle: 'Use has stopped',
  stopped: (since: string, at: Moment): string =>
    `Nothing has gone from here since ${day(dateOf(since, at.zone))}. Ask the ward whether it still needs this item. If not, the place can be retired in Hospital and what is left moved.`,
  stoppedLink: 'Open the place in Hospital',
} as const
