import type { Clock } from '../clock.ts'
import { momentOf, viewBins } from '../counts/bin-view.service.ts'
import type { Db } from '../db/client.ts'
import { newestRun, recomputeAll } from '../policy/runs.service.ts'
import { dropPolicyJobs } from './demo.repository.ts'

const dayMs = 86_400_000
/** Vital places are also worked out as of these many days ago, so that their points have a past. */
const lookBackDays = [60, 24, 16]
/** Every place once more before today's run: what they then know is what they teach each other. */
const firstNightDays = 8

/** Works out every place's policy from the history, as the night's run does; single looks that waited are not needed. */
export async function computeDemoPolicies(db: Db, clock: Clock, say: (line: string) => void): Promise<void> {
  const first = (await newestRun(db, 'nightly')) === null
  const vital = (await viewBins(db, momentOf(clock, 'utc'), { roomIds: null, retired: false })).filter(
    (v) => v.row.ved === 'V',
  )
  const binIds = vital.map((v) => v.row.id)
  const asOf = (days: number): Clock => {
    const then = new Date(clock.now().getTime() - days * dayMs)
    return { now: () => then }
  }
  if (first) {
    for (const days of lookBackDays) await recomputeAll(db, asOf(days), 'nightly', { binIds, isAlone: true })
    await recomputeAll(db, asOf(firstNightDays), 'nightly', { isAlone: true })
  }
  await recomputeAll(db, clock, 'nightly', {
    isAlone: first,
    onProgress: (done, of) => {
      if (done % 80 === 0 || done === of) say(`Demo hospital: ${done} of ${of} reorder points worked out.`)
    },
  })
  await dropPolicyJobs(db, clock.now())
}
