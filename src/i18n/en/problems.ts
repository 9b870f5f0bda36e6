import { Problem } from '#shared/kernel/problem.ts'
import { Offline } from '#src/services/api.ts'

export interface Said {
  title: string
  detail: string
  offline: boolean
  /** Only signing in again helps. */
  signIn: boolean
}

const offlineWords = {
  network: {
    title: 'No connection',
    detail: 'The record cannot be reached from here. What is on this phone stays safe. Try again when there is signal.',
  },
  'not-ours': {
    title: 'The network needs a sign-in',
    detail:
      'Another page answered in our place, as guest networks do. Open a browser page, sign in to the network, come back.',
  },
  timeout: {
    title: 'The record is slow to answer',
    detail: 'Nothing came back for 20 seconds. Try again in a moment.',
  },
} as const

/** For an answer of ours that carries no sentence. */
const unread = {
  title: 'Something broke on our side',
  detail: 'What is on this phone is safe. Try again in a moment; if it stays, tell your administrator.',
} as const

/** An address that cannot name anything. */
const noSuch = {
  title: 'There is nothing at this address',
  detail: 'It may be mistyped or cut short. Choose it from a list.',
} as const

export const problemWords = {
  retry: 'Try again',
  signInAgain: 'Sign in again',
  checkFields: (count: number): string => (count === 1 ? 'Check 1 field' : `Check ${count} fields`),
  /** What happened and what to do, for anything that was thrown. */
  say(error: unknown): Said {
    if (error instanceof Offline) return { ...offlineWords[error.reason], offline: true, signIn: false }
    if (error instanceof Problem && error.errors?.length && error.errors.every((e) => e.pointer === '/id')) {
      return { title: noSuch.title, detail: noSuch.detail, offline: false, signIn: false }
    }
    if (error instanceof Problem) {
      const wait = error.retryAfter ? ` Wait ${error.retryAfter} seconds.` : ''
      return {
        title: error.title || unread.title,
        detail: (error.detail || (error.title ? '' : unread.detail)) + wait,
        offline: false,
        signIn: error.code === 'not-signed-in',
      }
    }
    return {
      title: 'This page stopped',
      detail: 'Nothing was sent. Load the page again; if it stops again, tell your administrator what you pressed.',
      offline: false,
      signIn: false,
    }
  },
} as const
