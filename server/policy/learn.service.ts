import type { Exposure } from '#shared/demand/activity.ts'
import { learnDemand, type LearnedDemand } from '#shared/demand/learn-demand.ts'
import type { BinView } from '../counts/bin-view.service.ts'
import { foldedLedger } from '../counts/levels.service.ts'
import type { Reader } from '../db/client.ts'
import { listExclusions } from './exclusions.repository.ts'

/** A stretch so unlike the rest that a person is asked what it was. Epoch ms, units of use. */
export interface Question {
  closingOpId: string
  from: number
  to: number
  quantity: number
  expected: number
}

/** The demand process of a bin with the questions about it that no person has answered. */
export interface Learned extends LearnedDemand {
  questions: Question[]
}

/** The demand process of a place and its overflow places, from what their ledgers hold up to a moment. */
export async function learnFrom(db: Reader, view: BinView, until: Date | null, exposure: Exposure): Promise<Learned> {
  const rowsOf = async (binId: number, assignmentId: number | null) =>
    (await foldedLedger(db, binId, assignmentId, until)).folded.rows
  const own = await rowsOf(view.row.id, view.row.assignmentId)
  const overflow = []
  for (const place of view.overflow) overflow.push(await rowsOf(place.binId, place.assignmentId))
  const said = await listExclusions(db, view.row.id, view.row.assignmentId)
  const spans = said.map((e) => ({
    id: String(e.id),
    kind: e.kind,
    from: e.fromAt.getTime(),
    to: e.toAt?.getTime() ?? Infinity,
  }))
  const starts = spans.filter((s) => s.kind === 'history-start').map((s) => s.from)
  const learned = learnDemand(
    own,
    {
      packSize: view.bin.packSize,
      plannedRhythmDays: view.row.countEveryDays,
      exposure,
      historyStart: starts.length ? Math.max(...starts) : null,
      exclusions: spans.filter((s) => s.kind === 'excluded'),
    },
    overflow,
  )
  const real = spans.filter((s) => s.kind === 'real')
  const isAnswered = (q: Question): boolean => real.some((s) => s.from < q.to && s.to > q.from)
  return { ...learned, questions: questionsOf(learned).filter((q) => !isAnswered(q)) }
}

/** Nobody remembers what a stretch further back than this was. Our choice. */
const rememberedMs = 60 * 86_400_000

/** A merged interval is asked about as the whole it was judged as. */
function questionsOf({ intervals, outliers }: LearnedDemand): Question[] {
  return outliers.flatMap(({ closingOpId, quantity, expected }) => {
    const at = intervals.findIndex((i) => i.closingOpId === closingOpId)
    const closing = intervals[at]
    if (!closing || closing.closedAt < (intervals.at(-1)?.closedAt ?? 0) - rememberedMs) return []
    let first = at
    for (let sum = closing.quantity; sum !== quantity && intervals[first - 1]?.why === 'merged';) {
      first -= 1
      sum += intervals[first]!.quantity
    }
    return [{ closingOpId, from: intervals[first]!.openedAt, to: closing.closedAt, quantity, expected }]
  })
}
