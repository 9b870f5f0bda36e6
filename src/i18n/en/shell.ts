import { counted } from './format.ts'
import { plannedWords } from './planned-changes.ts'

export const shellWords = {
  places: {
    today: 'Today',
    count: 'Count',
    rooms: 'Rooms',
    restock: 'Restock',
    review: 'Review',
    hospital: 'Hospital',
    me: 'Me',
    more: 'More',
  },
  /** What a page is called in the tab. */
  titleOf: (place: string | undefined, route: string): string | null => {
    if (route.startsWith('planned-change')) return plannedWords.title
    if (place) return (shellWords.places as Record<string, string>)[place] ?? null
    return route === 'sign-in' ? 'Sign in' : route === 'password-reset' ? 'New password' : null
  },
  navigation: 'Places',
  night: 'Night',
  day: 'Day',
  toNight: 'Switch to night colours',
  toDay: 'Switch to day colours',
  offline: 'No connection. What you save stays on this phone until there is signal.',
  ended: 'Your session has ended.',
  endedLink: (unsent: number): string =>
    unsent > 0 ? `Sign in again to send ${counted(unsent, 'entry', 'entries')}` : 'Sign in again',
  unchecked: 'Not checked with the record for more than 14 hours. You can finish and save counts.',
  update: 'A newer version is ready.',
  updateNow: 'Use it now',
  notFoundTitle: 'There is no such page',
  notFound: 'The address may be mistyped or old.',
  toToday: 'Go to Today',
  notYours: 'This page belongs to another role.',
} as const
