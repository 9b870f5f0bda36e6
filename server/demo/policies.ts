import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { recomputeAll } from '../policy/policy.service.ts'
import { dropPolicyJobs } from './demo.repository.ts'

/** Works out every place's policy from the history, as the night's run does; single looks that waited are not needed. */
export async function computeDemoPolicies(db: Db, clock: Clock, say: (line: string) => void): Promise<void> {
  await recomputeAll(db, clock, 'nightly', (done, of) => {
    if (done % 80 === 0 || done === of) say(`Demo hospital: ${done} of ${of} reorder points worked out.`)
  })
  await dropPolicyJobs(db, clock.now())
}
