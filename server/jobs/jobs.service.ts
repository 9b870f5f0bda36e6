import { randomUUID } from 'node:crypto'
import type { Clock } from '../clock.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { deleteJob, failJob, insertJob, leaseJob, listStuck, renewLease } from './jobs.repository.ts'

export type JobHandler = (payload: unknown) => Promise<void>

/** Asks for work in the transaction that causes it. */
export async function enqueue(
  tx: Tx | Db,
  now: Date,
  kind: string,
  payload: unknown,
  dedupeKey: string | null = null,
): Promise<void> {
  await insertJob(tx, { kind, payload, dedupeKey, runAt: now, attempts: 0, createdAt: now })
}

const leaseMs = 120_000
const renewMs = 30_000

/** Runs one due job of the kinds that are handled. @returns whether there was one */
export async function runOne(
  db: Db,
  clock: Clock,
  handlers: Record<string, JobHandler>,
  owner: string,
): Promise<boolean> {
  const job = await leaseJob(db, Object.keys(handlers), owner, clock.now(), leaseMs)
  if (!job) return false
  const renewal = setInterval(() => void keepLease(db, clock, job.id, owner), renewMs)
  try {
    await handlers[job.kind]!(job.payload)
    await deleteJob(db, job.id)
  } catch (error) {
    const wait = Math.min(3_600_000, 2_000 * 2 ** job.attempts)
    await failJob(db, job.id, {
      attempts: job.attempts + 1,
      runAt: new Date(clock.now().getTime() + wait),
      lastError: String(error instanceof Error ? error.message : error).slice(0, 300),
    })
  } finally {
    clearInterval(renewal)
  }
  return true
}

/** A long run keeps its job for as long as it lives; killed, it gives the job up within the lease. */
async function keepLease(db: Db, clock: Clock, id: number, owner: string): Promise<void> {
  try {
    await renewLease(db, id, owner, new Date(clock.now().getTime() + leaseMs))
  } catch {
    // The next renewal comes well before the lease ends.
  }
}

/** Runs everything that is due; for tests and the end of a bulk load. */
export async function drainJobs(db: Db, clock: Clock, handlers: Record<string, JobHandler>): Promise<number> {
  const owner = randomUUID()
  let done = 0
  while (await runOne(db, clock, handlers, owner)) done += 1
  return done
}

export interface Worker {
  stop(): Promise<void>
}

/** Looks for work a few times a second until stopped; finishes what it has begun. */
export function startWorker(
  ticks: (() => Promise<boolean>)[],
  everyMs: number,
  onError: (error: unknown) => void,
): Worker {
  let stopped = false
  let timer: NodeJS.Timeout | null = null
  let running: Promise<void> = Promise.resolve()
  const pass = async (): Promise<void> => {
    for (const tick of ticks) {
      try {
        while (!stopped && (await tick()));
      } catch (error) {
        onError(error)
      }
    }
  }
  const next = (): void => {
    if (stopped) return
    running = pass().then(() => {
      if (!stopped) timer = setTimeout(next, everyMs)
    })
  }
  next()
  return {
    async stop() {
      stopped = true
      if (timer) clearTimeout(timer)
      await running
    },
  }
}

export const stuckJobs = (db: Reader) => listStuck(db, 3)
