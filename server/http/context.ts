import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import type { User } from '#shared/contracts/people.ts'

/** The signed-in person, as every service takes it. */
export interface Actor {
  id: number
  role: User['role']
  /** Rooms in scope; null is every room. */
  roomIds: number[] | null
  authzVersion: number
}

/** What the app is made with; nothing else reaches into the process. */
export interface AppDeps {
  db: Db
  clock: Clock
  dataDir: string
  clientDir: string | null
  sessionSecrets: string[]
  publicUrl: string | null
  trustProxy: string | null
  logLevel: string
}
