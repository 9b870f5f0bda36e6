import { defineStore } from 'pinia'
import { computed, ref, shallowRef, watch } from 'vue'
import type { OutboxEntry } from '#shared/stored/outbox/index.ts'
import { watchConnection } from '#src/services/offline-db.ts'
import {
  discardEntry,
  entriesOf,
  joinOtherTabs,
  leaveOtherTabs,
  onOutboxChange,
  replaceEntry,
  resendEntry,
  saveEntries,
  waitingOfOthers,
  type NewEntry,
} from '#src/services/outbox.ts'
import { protectStorage } from '#src/services/service-worker.ts'
import { startSync, type SyncState } from '#src/services/sync.ts'
import { useSessionStore } from './session.ts'

const isOpen = (entry: OutboxEntry): boolean => ['queued', 'sending', 'attention'].includes(entry.state)

/** Initials for the next person at a shared phone: "M.O.". */
export const initialsOf = (name: string): string =>
  name
    .split(/\s+/)
    .filter(Boolean)
    .map((part) => `${part.charAt(0).toUpperCase()}.`)
    .join('')

/** What this person entered on this phone, and how sending it goes. */
export const useOutboxStore = defineStore('outbox', () => {
  const session = useSessionStore()
  const entries = shallowRef<OutboxEntry[]>([])
  const others = shallowRef<{ initials: string; count: number }[]>([])
  const sending = ref<SyncState>({ phase: 'idle', nextTryAt: null, lastSentAt: null })
  /** False when the browser may clear this phone's storage; null when it was not asked yet. */
  const storageProtected = ref<boolean | null>(null)
  let stopSync: (() => void) | null = null
  let sendNow: () => Promise<void> = () => Promise.resolve()

  const waiting = computed(() => entries.value.filter((e) => e.state === 'queued' || e.state === 'sending'))
  const attention = computed(() => entries.value.filter((e) => e.state === 'attention'))
  const unsent = computed(() => waiting.value.length + attention.value.length)
  /** What sending is doing; after the end of a session it waits for the same person, whatever it did last. */
  const sync = computed<SyncState>(() => (session.ended ? { ...sending.value, phase: 'signed-out' } : sending.value))
  const oldestWaitingAt = computed(() => entries.value.find(isOpen)?.savedAt ?? null)

  async function load(): Promise<void> {
    const userId = session.user?.id ?? null
    const [mine, theirs] = await Promise.all([userId ? entriesOf(userId) : [], waitingOfOthers(userId)])
    // Another person may have signed in while the database answered.
    if ((session.user?.id ?? null) !== userId) return
    entries.value = mine
    others.value = theirs
  }

  /** Units put away against an order line on this phone that are not in the record yet. */
  const putAwayWaiting = (orderLineId: string): number =>
    waiting.value
      .filter((e) => e.op.type === 'receipt' && e.op.orderLineId === orderLineId)
      .reduce((sum, e) => sum + (typeof e.op.quantity === 'number' ? e.op.quantity : 0), 0)

  const owner = (): { userId: string; initials: string } => {
    const { user } = session
    if (!user) throw new Error('nobody is signed in on this phone')
    return { userId: user.id, initials: initialsOf(user.name) }
  }

  /** Saves entries of the signed-in person; resolves once they are safe on this phone. */
  async function save(fresh: Omit<NewEntry, 'userId' | 'initials'>[]): Promise<OutboxEntry[]> {
    const mine = owner()
    const saved = await saveEntries(
      fresh.map((one) => ({ ...one, ...mine })),
      Date.now(),
    )
    if (storageProtected.value === null) {
      storageProtected.value = false
      void protectStorage().then((safe) => (storageProtected.value = safe))
    }
    await load()
    return saved
  }

  const fix = async (opId: string, fresh: Omit<NewEntry, 'userId' | 'initials'>): Promise<void> => {
    await replaceEntry(opId, { ...fresh, ...owner() }, Date.now())
  }
  const resend = (opId: string): Promise<void> => resendEntry(opId)
  const discard = (opId: string, reason: string): Promise<void> => discardEntry(opId, reason, Date.now())

  /** Starts keeping and sending, once a page. */
  function start(): void {
    if (stopSync) return
    const started = startSync({
      userId: () => (session.ended ? null : (session.user?.id ?? null)),
      refreshSession: () => session.confirm(),
      onAuthzVersion: (version) => {
        if (version !== session.authzVersion) void session.confirm().catch(() => undefined)
      },
      onState: (state) => (sending.value = state),
    })
    sendNow = started.now
    joinOtherTabs()
    watchConnection()
    window.addEventListener('pagehide', leaveOtherTabs)
    window.addEventListener('pageshow', joinOtherTabs)
    const stopListening = onOutboxChange(() => void load().catch(() => undefined))
    const stopWatching = watch(
      () => [session.user?.id, session.ended],
      () => {
        void load().catch(() => undefined)
        void sendNow()
      },
      { immediate: true },
    )
    session.onUnsent(async () => {
      await load()
      return unsent.value
    })
    stopSync = () => {
      started.stop()
      stopListening()
      stopWatching()
      leaveOtherTabs()
      stopSync = null
    }
  }

  return {
    entries,
    others,
    sync,
    storageProtected,
    waiting,
    attention,
    unsent,
    oldestWaitingAt,
    putAwayWaiting,
    load,
    save,
    fix,
    resend,
    discard,
    start,
    stop: () => stopSync?.(),
    sendNow: () => sendNow(),
  }
})
