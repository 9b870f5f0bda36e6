import type { RouteLocationNormalized, RouteLocationRaw } from 'vue-router'
import type { Role } from '#shared/contracts/contract.ts'
import type { User } from '#shared/contracts/people.ts'

declare module 'vue-router' {
  interface RouteMeta {
    /** Needs no sign-in. */
    open?: boolean
    /** Who may see it; without it everyone signed in may. */
    roles?: readonly Role[]
    /** Works from what the phone keeps, also when the session is over. */
    offline?: boolean
    /** The place that is marked in the bar. */
    place?: string
    /** Roles that reach the page from another place. */
    placeOf?: Partial<Record<Role, string>>
  }
}

export interface Who {
  user: User | null
  ended: boolean
}

/** Whether a person may be on a page; if not, where to go instead. The server decides again on every call. */
export function guard(to: RouteLocationNormalized, who: Who): true | RouteLocationRaw {
  if (to.meta.open) return true
  const back = to.fullPath === '/' ? undefined : { next: to.fullPath }
  if (!who.user) return { name: 'sign-in', query: back }
  if (who.ended && !to.meta.offline) return { name: 'sign-in', query: back }
  if (to.meta.roles && !to.meta.roles.includes(who.user.role)) return { name: 'not-yours' }
  // People are the one kind of record that only the administrator sees.
  if (to.params.kind === 'people' && who.user.role !== 'administrator') return { name: 'not-yours' }
  return true
}
