import { DateTime } from 'luxon'
import { z } from 'zod'
import { causesOfChange } from '#shared/policy/in-force.ts'
import { hospitalExists, readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { recompute } from '../policy/policy.service.ts'
import { newestRun, recomputeAll } from '../policy/runs.service.ts'
import { enqueue, type JobHandler } from './jobs.service.ts'

const cause = z.enum(causesOfChange)
const OneBin = z.object({ binId: z.number().int(), cause })
const AllBins = z.object({ cause })

/** A run cut short this long ago at most is gone on with; an older one is begun anew. */
const resumeMs = 12 * 3_600_000

/** What runs behind the answers, by kind. */
export function jobHandlers(db: Db, clock: Clock): Record<string, JobHandler> {
  return {
    'policy-bin': async (payload) => {
      const job = OneBin.parse(payload)
      await inTransaction(db, (tx) => recompute(tx, clock, job.binId, job.cause))
    },
    'policy-all': async (payload) => {
      const resumeSince = new Date(clock.now().getTime() - resumeMs)
      await recomputeAll(db, clock, AllBins.parse(payload).cause, { resumeSince })
    },
  }
}

const nightHour = 3

/** Asks for the night's run once a day, whichever instance looks first. */
export async function scheduleNightly(db: Db, clock: Clock): Promise<void> {
  if (!(await hospitalExists(db))) return
  const { timeZone } = await readHospital(db)
  const local = DateTime.fromJSDate(clock.now(), { zone: timeZone })
  const due = local.set({ hour: nightHour, minute: 0, second: 0, millisecond: 0 })
  if (local < due) return
  const last = await newestRun(db, 'nightly')
  if (last && last.startedAt.getTime() >= due.toMillis()) return
  await enqueue(db, clock.now(), 'policy-all', { cause: 'nightly' }, `nightly-${due.toISODate()}`)
}
