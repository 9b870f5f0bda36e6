import 'fake-indexeddb/auto'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { User } from '#shared/contracts/people.ts'
import {
  forgetRemembered,
  isSignOutPending,
  markSignedOut,
  REMEMBER_HOURS,
  readRemembered,
  writeRemembered,
} from '#src/services/remembered.ts'
import { useSessionStore } from '#src/stores/session.ts'

const nurse: User = {
  id: '1',
  name: 'Mira Aldous',
  email: 'nurse@tallowmere.example',
  staffCode: 'N-1',
  role: 'nurse',
  roomIds: ['1'],
}
const fetching = vi.fn<typeof fetch>()
const headers = { 'Content-Type': 'application/json', 'X-Brimline': '1' }
const answer = (body: unknown, status = 200): Response => new Response(JSON.stringify(body), { status, headers })

beforeEach(async () => {
  setActivePinia(createPinia())
  await forgetRemembered()
  await markSignedOut(false)
  fetching.mockReset()
  vi.stubGlobal('fetch', fetching)
})
afterEach(async () => {
  await markSignedOut(false)
  vi.unstubAllGlobals()
})

describe('the session', () => {
  it('knows the person without a network, from what the phone remembers', async () => {
    await writeRemembered(nurse, 3, Date.now())
    fetching.mockRejectedValue(new TypeError('Failed to fetch'))
    const session = useSessionStore()
    await session.restore()
    expect(session.user).toEqual(nurse)
    expect(session.known).toBe('remembered')
    expect(session.ended).toBe(false)
  })

  it('still lets somebody finish after the remembered time, and says that it was not checked', async () => {
    await writeRemembered(nurse, 3, Date.now() - (REMEMBER_HOURS + 1) * 3_600_000)
    fetching.mockRejectedValue(new TypeError('Failed to fetch'))
    const session = useSessionStore()
    await session.restore()
    expect(session.known).toBe('unchecked')
    expect(session.user?.id).toBe('1')
  })

  it('asks the server once, however many pages ask', async () => {
    fetching.mockResolvedValue(answer({ user: nurse, authzVersion: 1 }))
    const session = useSessionStore()
    await Promise.all([session.restore(), session.restore()])
    expect(fetching).toHaveBeenCalledTimes(1)
    expect(session.known).toBe('confirmed')
    expect((await readRemembered())?.user.id).toBe('1')
  })

  it('keeps the person when the server says the session ended, and marks it', async () => {
    await writeRemembered(nurse, 3, Date.now())
    fetching.mockResolvedValue(answer({ user: null }))
    const session = useSessionStore()
    await session.restore()
    await vi.waitFor(() => expect(session.ended).toBe(true))
    expect(session.user?.id).toBe('1')
    fetching.mockResolvedValue(answer({ user: nurse, authzVersion: 3 }, 201))
    await session.signIn({ email: nurse.email, password: 'x' })
    expect(session.ended).toBe(false)
  })

  it('clears cached reads when another person signs in, or when rights changed', async () => {
    const clear = vi.fn()
    const session = useSessionStore()
    session.onClearReads(clear)
    fetching.mockResolvedValueOnce(answer({ user: nurse, authzVersion: 1 }, 201))
    await session.signIn({ email: nurse.email, password: 'x' })
    expect(clear).not.toHaveBeenCalled()
    fetching.mockResolvedValueOnce(answer({ user: nurse, authzVersion: 2 }))
    await session.confirm()
    fetching.mockResolvedValueOnce(answer({ user: { ...nurse, id: '2' }, authzVersion: 2 }, 201))
    await session.signIn({ email: nurse.email, password: 'x' })
    expect(clear).toHaveBeenCalledTimes(2)
  })

  it('signs out without a network too: the phone forgets the person', async () => {
    const clear = vi.fn()
    const session = useSessionStore()
    session.onClearReads(clear)
    fetching.mockResolvedValueOnce(answer({ user: nurse, authzVersion: 1 }, 201))
    await session.signIn({ email: nurse.email, password: 'x' })
    fetching.mockRejectedValueOnce(new TypeError('Failed to fetch'))
    await session.signOut()
    expect(session.user).toBeNull()
    expect(await readRemembered()).toBeNull()
    expect(clear).toHaveBeenCalledTimes(1)
  })

  it('never takes up again a session that was left without a network', async () => {
    const before = useSessionStore()
    fetching.mockResolvedValueOnce(answer({ user: nurse, authzVersion: 1 }, 201))
    await before.signIn({ email: nurse.email, password: 'x' })
    fetching.mockRejectedValueOnce(new TypeError('Failed to fetch'))
    await before.signOut()

    // The next start, with a network and the old cookie: the server is told first, and only then asked who is here.
    setActivePinia(createPinia())
    const said: string[] = []
    let isOver = false
    fetching.mockImplementation((_url, init) => {
      said.push(init?.method ?? 'GET')
      if (init?.method === 'DELETE') isOver = true
      return Promise.resolve(
        init?.method === 'DELETE'
          ? new Response(null, { status: 204, headers })
          : answer(isOver ? { user: null } : { user: nurse, authzVersion: 1 }),
      )
    })
    const after = useSessionStore()
    await after.restore()
    expect(said).toEqual(['DELETE', 'GET'])
    expect(after.user).toBeNull()
  })

  it('stays nobody while the server cannot be told', async () => {
    await markSignedOut(true)
    fetching.mockRejectedValue(new TypeError('Failed to fetch'))
    const session = useSessionStore()
    await session.restore()
    expect(session.user).toBeNull()
    expect(await isSignOutPending()).toBe(true)
  })
})
