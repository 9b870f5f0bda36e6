import type { Role } from '#shared/contracts/contract.ts'
import type { IconName } from '#src/components/base/icon-paths.ts'

export interface Place {
  /** Route name, and the key of its word. */
  name: 'today' | 'count' | 'rooms' | 'restock' | 'review' | 'hospital' | 'me'
  icon: IconName
}

const today: Place = { name: 'today', icon: 'today' }
const count: Place = { name: 'count', icon: 'count' }
const rooms: Place = { name: 'rooms', icon: 'rooms' }
const restock: Place = { name: 'restock', icon: 'restock' }
const review: Place = { name: 'review', icon: 'review' }
const hospital: Place = { name: 'hospital', icon: 'hospital' }

/** The places a role works in, most used first: on phones the first four stand in the bar, the rest under More. */
export const placesOf: Record<Role, readonly Place[]> = {
  nurse: [today, count, rooms],
  coordinator: [today, count, rooms, restock, review, hospital],
  reviewer: [today, review, rooms],
  administrator: [today, rooms, hospital],
}

export const BAR_PLACES = 4
