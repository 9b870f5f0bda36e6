import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import type { Role } from '#shared/contracts/contract.ts'
import {
  readSession,
  signIn as signInContract,
  signOut as signOutContract,
  type User,
} from '#shared/contracts/people.ts'
import { call, Offline, onContact } from '#src/services/api.ts'
import {
  forgetRemembered,
  isSignOutPending,
  markSignedOut,
  readRemembered,
  writeRemembered,
} from '#src/services/remembered.ts'

/**
 * How the present identity is known. `remembered`: from this phone, the server has not been asked yet;
 * `unchecked`: the same, longer than 14 hours after the last contact.
 */
export type Known = 'nobody' | 'remembered' | 'unchecked' | 'confirmed'

const RENEW_EVERY_MS = 60_000

export const useSessionStore = defineStore('session', () => {
  const user = ref<User | null>(null)
  const authzVersion = ref(0)
  const known = ref<Known>('nobody')
  /**
   * The server says that the session is over. The person stays known, so that a round in the hand can be finished and
   * saved; sending waits until the same person signs in again.
   */
  const ended = ref(false)
  const clearers = new Set<() => Promise<void> | void>()
  let restoring: Promise<void> | null = null
  let renewedAt = 0

  const role = computed<Role | null>(() => user.value?.role ?? null)
  const signedIn = computed(() => user.value !== null)

  /** Work to do at sign-out or when rights change: cached reads go, the outbox never does. */
  function onClearReads(clear: () => Promise<void> | void): void {
    clearers.add(clear)
  }

  /** How many entries of this person are not in the record yet; the outbox says so when it is set up. */
  let countUnsent: () => Promise<number> = () => Promise.resolve(0)
  const unsent = (): Promise<number> => countUnsent()
  function onUnsent(count: () => Promise<number>): void {
    countUnsent = count
  }

  async function clearReads(): Promise<void> {
    await Promise.allSettled([...clearers].map((clear) => clear()))
  }

  async function become(next: User, version: number): Promise<void> {
    const changed = user.value !== null && (user.value.id !== next.id || authzVersion.value !== version)
    if (changed) await clearReads()
    user.value = next
    authzVersion.value = version
    known.value = 'confirmed'
    ended.value = false
    renewedAt = Date.now()
    await writeRemembered(next, version, renewedAt)
  }

  async function becomeNobody(): Promise<void> {
    user.value = null
    authzVersion.value = 0
    known.value = 'nobody'
    await forgetRemembered()
    await clearReads()
  }

  /** Ends a session on the server that was left without a network; true when nothing of it is left. */
  async function finishSignOut(): Promise<boolean> {
    if (!(await isSignOutPending())) return true
    try {
      await call(signOutContract)
    } catch (error) {
      // A refusal means that there was nothing left to end.
      if (error instanceof Offline) return false
    }
    await markSignedOut(false)
    return true
  }

  async function confirm(): Promise<void> {
    if (!(await finishSignOut())) return
    const answer = await call(readSession)
    if (answer.user) await become(answer.user, answer.authzVersion ?? 0)
    else if (user.value) ended.value = true
  }

  async function restoreOnce(): Promise<void> {
    const kept = await readRemembered()
    if (kept) {
      user.value = kept.user
      authzVersion.value = kept.authzVersion
      known.value = kept.validUntil > Date.now() ? 'remembered' : 'unchecked'
      void confirm().catch(() => undefined)
      return
    }
    try {
      await confirm()
    } catch (error) {
      if (!(error instanceof Offline)) throw error
    }
  }

  /** Finds out who is here, once a start: from the phone at once, then from the server when it can be reached. */
  function restore(): Promise<void> {
    restoring ??= restoreOnce()
    return restoring
  }

  async function signIn(who: { email?: string; staffCode?: string; password: string }): Promise<void> {
    const answer = await call(signInContract, { body: who })
    if (!answer.user) return
    await markSignedOut(false)
    await become(answer.user, answer.authzVersion ?? 0)
  }

  /** Ends the session. Without a network the phone forgets the person all the same. */
  async function signOut(): Promise<void> {
    try {
      await call(signOutContract)
    } catch (error) {
      if (!(error instanceof Offline)) throw error
      await markSignedOut(true)
    } finally {
      ended.value = false
      await becomeNobody()
    }
  }

  // At the sign-in page nothing else would tell the server.
  window.addEventListener('online', () => {
    if (!user.value) void finishSignOut()
  })

  onContact({
    reply: () => {
      const now = Date.now()
      if (!user.value || known.value !== 'confirmed' || ended.value || now - renewedAt < RENEW_EVERY_MS) return
      renewedAt = now
      void writeRemembered(user.value, authzVersion.value, now)
    },
    signedOut: () => {
      if (user.value) ended.value = true
    },
  })

  return {
    user,
    authzVersion,
    known,
    ended,
    role,
    signedIn,
    onClearReads,
    onUnsent,
    unsent,
    restore,
    confirm,
    signIn,
    signOut,
  }
})
