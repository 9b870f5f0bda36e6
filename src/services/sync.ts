import { syncOperations } from '#shared/contracts/counts.ts'
import { call } from './api.ts'
import { APP_VERSION } from './app-version.ts'
import { deviceId, rememberClock } from './device.ts'
import { entriesOf, onOutboxChange, pruneReceipts, queuedOf, requeueSending } from './outbox.ts'
import { syncPass, type PassDeps, type PassEnd } from './sync-pass.ts'
import { learn } from './time.ts'

const PASS_LIMIT_MS = 60_000
const TIMER_MS = 60_000
const LOCK = 'brimline-outbox-sync'
const MAX_DELAY_MS = 300_000
const FIRST_DELAY_MS = 2_000

/** What sending is doing, for the strip at the top and the list of entries. */
export interface SyncState {
  phase: 'idle' | 'sending' | PassEnd['kind']
  /** Phone time of the next try, while waiting. */
  nextTryAt: number | null
  lastSentAt: number | null
}

export interface SyncOptions {
  /** The signed-in person, or null; entries of others never travel. */
  userId: () => string | null
  refreshSession: () => Promise<void>
  /** The version of rights in a reply; a change makes the phone drop what it cached. */
  onAuthzVersion: (version: number) => void
  onState: (state: SyncState) => void
}

/** Full jitter: random(0, min(5 min, 2 s × 2^n)). There is no last try and no greatest age. */
export const backoff = (attempt: number, random: () => number): number =>
  Math.round(random() * Math.min(MAX_DELAY_MS, FIRST_DELAY_MS * 2 ** Math.min(attempt, 10)))

async function probe(path: string): Promise<boolean> {
  try {
    const response = await fetch(path, { cache: 'no-store', signal: AbortSignal.timeout(5_000) })
    const json = /json/.test(response.headers.get('Content-Type') ?? '')
    return response.ok && !response.redirected && json && response.headers.get('X-Brimline') === '1'
  } catch {
    return false
  }
}

/** The real ends of a pass: this server, this phone's clock. */
export function passDeps(userId: string, options: SyncOptions, signal: AbortSignal): PassDeps {
  return {
    userId,
    signal,
    now: () => Date.now(),
    refreshSession: options.refreshSession,
    serverReady: () => probe('/readyz'),
    post: async (items) =>
      call(syncOperations, {
        body: {
          deviceId: await deviceId(),
          userId,
          appVersion: APP_VERSION,
          sentAt: new Date().toISOString(),
          items,
        },
      }),
    onAnswer: async (answer, sentAt, receivedAt) => {
      await rememberClock(learn(Date.parse(answer.serverTime), sentAt, receivedAt))
      options.onAuthzVersion(answer.authzVersion)
    },
  }
}

const needingAttention = async (userId: string): Promise<ReadonlySet<string>> =>
  new Set((await entriesOf(userId)).filter((entry) => entry.state === 'attention').map((entry) => entry.opId))

/** One holder an origin, so that two tabs do not send the same; correctness comes from the server all the same. */
async function locked(work: () => Promise<PassEnd>): Promise<PassEnd | null> {
  if (!('locks' in navigator)) return work()
  return navigator.locks.request(LOCK, { ifAvailable: true }, async (lock) => (lock ? work() : null))
}

/**
 * Sends entries whenever there is a chance: at start, when the page is shown again, when the network comes back, every
 * minute while visible, after each save, and when a person asks. On an iPhone that is only while the app is open.
 *
 * @returns `now` for "Send now", `stop` to take the listeners away
 */
export function startSync(options: SyncOptions): { now: () => Promise<void>; stop: () => void } {
  let attempt = 0
  let running = false
  let again = false
  let offline = false
  let timer: ReturnType<typeof setTimeout> | undefined
  let state: SyncState = { phase: 'idle', nextTryAt: null, lastSentAt: null }
  const show = (change: Partial<SyncState>): void => {
    state = { ...state, ...change }
    options.onState(state)
  }

  function plan(delay: number): void {
    clearTimeout(timer)
    timer = setTimeout(() => void run(), delay)
    show({ nextTryAt: Date.now() + delay })
  }

  async function afterwards(end: PassEnd): Promise<void> {
    show({
      phase: end.kind,
      nextTryAt: null,
      ...(end.kind === 'done' && end.sent > 0 ? { lastSentAt: Date.now() } : {}),
    })
    offline = end.kind === 'wait' && end.why === 'offline'
    if (end.kind === 'done') attempt = 0
    if (end.kind === 'wait') {
      plan(Math.max(end.retryAfterMs ?? 0, backoff(attempt, Math.random)))
      attempt += 1
    }
    // A captive portal is no fault of ours: look again soon, without growing the wait.
    if (end.kind === 'portal') plan((await probe('/healthz')) ? 500 : 15_000)
  }

  async function pass(userId: string): Promise<PassEnd> {
    const deps = passDeps(userId, options, AbortSignal.timeout(PASS_LIMIT_MS))
    return syncPass(deps, () => needingAttention(userId))
  }

  async function run(): Promise<void> {
    const userId = options.userId()
    if (!userId) return
    if (running) {
      again = true
      return
    }
    running = true
    clearTimeout(timer)
    try {
      show({ phase: 'sending', nextTryAt: null })
      const end = await locked(() => pass(userId))
      if (end) await afterwards(end)
      else show({ phase: 'idle' })
      // Something saved while the last batch was on its way.
      if (end?.kind === 'done' && (await queuedOf(userId)).length > 0) again = true
    } catch {
      // The database of this phone failed; entries are where they were.
      show({ phase: 'idle' })
      plan(backoff((attempt += 1), Math.random))
    } finally {
      running = false
    }
    if (again) {
      again = false
      await run()
    }
  }

  const fresh = (): void => {
    attempt = 0
    void run()
  }
  const visible = (): void => {
    if (document.visibilityState === 'visible') fresh()
  }
  const ticking = setInterval(() => {
    if (document.visibilityState === 'visible' && !state.nextTryAt) void run()
  }, TIMER_MS)
  // A change made by the pass itself must not start the next pass: only entries added while it is quiet do. Without a
  // network each save is a fresh chance; a server that asked for a pause, or a person who must act, is waited for.
  const stopListening = onOutboxChange(() => {
    const chance = ['idle', 'done'].includes(state.phase) || (offline && navigator.onLine)
    if (!running && chance) void run()
  })
  window.addEventListener('pageshow', fresh)
  window.addEventListener('online', fresh)
  document.addEventListener('visibilitychange', visible)
  void requeueSending()
    .then(() => pruneReceipts(Date.now()))
    .catch(() => undefined)
    .then(run)

  return {
    now: async () => {
      attempt = 0
      await run()
    },
    stop: () => {
      clearTimeout(timer)
      clearInterval(ticking)
      stopListening()
      window.removeEventListener('pageshow', fresh)
      window.removeEventListener('online', fresh)
      document.removeEventListener('visibilitychange', visible)
    },
  }
}
