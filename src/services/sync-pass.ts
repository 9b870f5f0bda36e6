import type { SyncAnswer, SyncResult } from '#shared/contracts/counts.ts'
import { Problem } from '#shared/kernel/problem.ts'
import type { OutboxEntry } from '#shared/stored/outbox/index.ts'
import { Offline } from './api.ts'
import { BATCH_ITEMS, changeEntries, queuedOf, replyOf, type EntryChange } from './outbox.ts'

/** Bytes of a batch; the server takes 64 KB with its envelope. */
const BATCH_BYTES = 60_000

export interface PassDeps {
  userId: string
  /** Sends one batch. @throws Problem when the server refused it, Offline when no believable answer came. */
  post: (items: Record<string, unknown>[]) => Promise<SyncAnswer>
  now: () => number
  /** Asks who is signed in, once, after a 403. */
  refreshSession: () => Promise<void>
  /** Whether the server says that it is whole: a fault then lies in the batch. */
  serverReady: () => Promise<boolean>
  onAnswer: (answer: SyncAnswer, sentAt: number, receivedAt: number) => Promise<void>
  /** Set when the pass should end, for example after a minute. */
  signal: AbortSignal
}

/**
 * How a pass ended. `done`: nothing left to send now. `wait`: try again later, `retryAfterMs` when the server said
 * when. `portal`: another program answers in the server's place. The rest wait for a person.
 */
export type PassEnd =
  | { kind: 'done'; sent: number }
  | { kind: 'wait'; retryAfterMs: number | null; why: 'offline' | 'busy' | 'fault' }
  | { kind: 'portal' }
  | { kind: 'signed-out' }
  | { kind: 'other-person' }
  | { kind: 'update' }

/** The next batch: in the order made, no larger than its smallest limit, within the bytes. */
export function takeBatch(queued: readonly OutboxEntry[]): OutboxEntry[] {
  const batch: OutboxEntry[] = []
  let limit = BATCH_ITEMS
  let bytes = 0
  for (const entry of queued) {
    limit = Math.min(limit, entry.batchLimit)
    bytes += new TextEncoder().encode(JSON.stringify(entry.op)).length + 1
    if (batch.length > 0 && (batch.length >= limit || bytes > BATCH_BYTES)) break
    batch.push(entry)
  }
  return batch
}

const all = (entries: readonly OutboxEntry[], change: EntryChange): Map<string, EntryChange> =>
  new Map(entries.map((entry) => [entry.opId, change]))

/** What one result makes of its entry. */
function settle(result: SyncResult, now: number): EntryChange {
  const reply = replyOf(result.status, now, {
    code: result.code ?? null,
    message: result.message ?? null,
    fixable: result.fixable ?? false,
    flags: result.flags ?? [],
  })
  switch (result.status) {
    case 'accepted':
    case 'duplicate':
    case 'accepted_with_conflict':
      return { state: 'acked', closedAt: now, reply }
    case 'rejected':
      return { state: 'attention', reply }
    case 'retry':
      return { state: 'queued', reply }
  }
}

/** Halves a batch that was refused as a whole; an entry that fails alone goes to the person. */
async function split(batch: readonly OutboxEntry[], problem: Problem, now: number): Promise<void> {
  const reply = replyOf('refused', now, { code: problem.code, message: problem.detail })
  if (batch.length === 1) await changeEntries(all(batch, { state: 'attention', reply }))
  else await changeEntries(all(batch, { state: 'queued', faults: 0, batchLimit: Math.ceil(batch.length / 2) }))
}

/** Statuses at which a batch is not at fault and waits. */
const transient = [408, 425, 429, 503]

async function afterProblem(
  batch: OutboxEntry[],
  problem: Problem,
  deps: PassDeps,
  pass: Pass,
): Promise<PassEnd | null> {
  const { status } = problem
  const back = (): Promise<void> => changeEntries(all(batch, { state: 'queued' }))
  const later = problem.retryAfter === undefined ? null : problem.retryAfter * 1000
  if (status === 401) return back().then(() => ({ kind: 'signed-out' }))
  if (status === 409) return back().then(() => ({ kind: 'other-person' }))
  if (status === 426) return back().then(() => ({ kind: 'update' }))
  if (transient.includes(status)) return back().then(() => ({ kind: 'wait', retryAfterMs: later, why: 'busy' }))
  if (status === 403 && !pass.askedSession) {
    pass.askedSession = true
    await back()
    await deps.refreshSession().catch(() => undefined)
    return null
  }
  if (status === 403) {
    const reply = replyOf('refused', deps.now(), { code: problem.code, message: problem.detail })
    await changeEntries(all(batch, { state: 'attention', reply }))
    return null
  }
  if (status >= 500) {
    const faults = Math.max(...batch.map((entry) => entry.faults)) + 1
    await changeEntries(all(batch, { state: 'queued', faults }))
    // Once may be a hiccup. Twice with a whole server points at something in the batch: halve it until it is found.
    if (faults < 2 || !(await deps.serverReady())) return { kind: 'wait', retryAfterMs: later, why: 'fault' }
  }
  await split(batch, problem, deps.now())
  return null
}

interface Pass {
  askedSession: boolean
  /** Entries that may not travel again in this pass: told to retry, or left out of the answer. */
  held: Set<string>
  sent: number
}

/** Entries that name another of this phone wait for as long as a person has to decide about that one. */
function sendable(queued: OutboxEntry[], waitingFor: ReadonlySet<string>, held: ReadonlySet<string>): OutboxEntry[] {
  return queued.filter((entry) => {
    const target = entry.op.targetOpId
    return !held.has(entry.opId) && !(typeof target === 'string' && waitingFor.has(target))
  })
}

async function sendBatch(batch: OutboxEntry[], deps: PassDeps, pass: Pass): Promise<PassEnd | null> {
  await changeEntries(all(batch, { state: 'sending' }))
  const sentAt = deps.now()
  let answer: SyncAnswer
  try {
    answer = await deps.post(batch.map((entry) => entry.op))
  } catch (error) {
    if (error instanceof Problem) return afterProblem(batch, error, deps, pass)
    await changeEntries(all(batch, { state: 'queued' }))
    if (error instanceof Offline && error.reason === 'not-ours') return { kind: 'portal' }
    // No network, too slow, or an answer that breaks off or has another shape: nothing is known, so all is kept.
    return { kind: 'wait', retryAfterMs: null, why: error instanceof Offline ? 'offline' : 'fault' }
  }
  const receivedAt = deps.now()
  const results = new Map(answer.results.map((result) => [result.opId, result]))
  const changes = new Map<string, EntryChange>()
  for (const entry of batch) {
    const result = results.get(entry.opId)
    // Missing in the answer means not processed; an id that was never sent means nothing.
    const change: EntryChange = result ? settle(result, receivedAt) : { state: 'queued' }
    if (change.state === 'acked') pass.sent += 1
    if (change.state === 'queued') pass.held.add(entry.opId)
    changes.set(entry.opId, change)
  }
  await changeEntries(changes)
  await deps.onAnswer(answer, sentAt, receivedAt)
  return null
}

/**
 * Sends what one person has waiting, batch by batch, until nothing is left that may travel now. Entries are kept
 * whatever happens: only a result that names an entry closes it.
 */
export async function syncPass(deps: PassDeps, attention: () => Promise<ReadonlySet<string>>): Promise<PassEnd> {
  const pass: Pass = { askedSession: false, held: new Set(), sent: 0 }
  while (!deps.signal.aborted) {
    const queued = sendable(await queuedOf(deps.userId), await attention(), pass.held)
    const batch = takeBatch(queued)
    if (batch.length === 0) break
    const end = await sendBatch(batch, deps, pass)
    if (end) return end
  }
  return pass.held.size > 0 ? { kind: 'wait', retryAfterMs: null, why: 'busy' } : { kind: 'done', sent: pass.sent }
}
