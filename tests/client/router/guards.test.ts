import { describe, expect, it } from 'vitest'
import type { RouteLocationNormalized } from 'vue-router'
import type { User } from '#shared/contracts/people.ts'
import { guard } from '#src/router/guards.ts'

const user = (role: User['role']): User => ({
  id: '1',
  name: 'A',
  email: 'a@b.example',
  staffCode: 'A',
  role,
  roomIds: null,
})
const to = (meta: object, params = {}): RouteLocationNormalized =>
  ({ meta, params, fullPath: '/restock?bin=1' }) as unknown as RouteLocationNormalized

describe('guard', () => {
  it('sends a stranger to the sign-in and remembers where they wanted to go', () => {
    expect(guard(to({}), { user: null, ended: false })).toEqual({ name: 'sign-in', query: { next: '/restock?bin=1' } })
    expect(guard(to({ open: true }), { user: null, ended: false })).toBe(true)
  })

  it('keeps roles to their pages', () => {
    const meta = { roles: ['coordinator'] }
    expect(guard(to(meta), { user: user('nurse'), ended: false })).toEqual({ name: 'not-yours' })
    expect(guard(to(meta), { user: user('coordinator'), ended: false })).toBe(true)
    expect(guard(to({}, { kind: 'people' }), { user: user('coordinator'), ended: false })).toEqual({
      name: 'not-yours',
    })
  })

  it('lets an ended session go on only where the phone suffices', () => {
    expect(guard(to({ offline: true }), { user: user('nurse'), ended: true })).toBe(true)
    expect(guard(to({}), { user: user('nurse'), ended: true })).toMatchObject({ name: 'sign-in' })
  })
})
