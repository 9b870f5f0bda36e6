import { randomBytes } from 'node:crypto'
import type { Hospital } from '#shared/contracts/hospital.ts'
import { createHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { createUser } from '../people/people.service.ts'

/** Settings nobody has chosen yet; levels are starting values, not advice. */
const neutral: Hospital = {
  name: 'My hospital',
  timeZone: 'UTC',
  binWord: 'bin',
  currency: 'EUR',
  levels: { V: 0.995, E: 0.98, D: 0.95 },
  floor: 0.9,
  ceiling: 0.999,
  twoPersons: false,
  vitalPolicyText: '',
  vitalPolicyLink: '',
  resupplyPhone: '',
  orderingCost: 0,
  holdingRatePerYear: 0.2,
  calendarId: null,
  pooling: true,
  demo: false,
}

const administrator = { name: 'Administrator', email: 'administrator@hospital.example', staffCode: 'ADMIN-1' }

/** An empty hospital with one person who can add the others; that sign-in is said once. */
export async function makeEmptyHospital(db: Db, clock: Clock, say: (line: string) => void): Promise<void> {
  const password = randomBytes(12).toString('base64url')
  await inTransaction(db, async (tx) => {
    await createHospital(tx, clock, neutral)
    await createUser(tx, clock, null, { ...administrator, role: 'administrator', roomIds: null, password })
  })
  say('An empty hospital stands. This sign-in is said once, now:')
  say(`  Administrator  ${administrator.email}  staff code ${administrator.staffCode}   password ${password}`)
  say('Sign in, change both on the Hospital page, and set the time zone before anything else.')
}
