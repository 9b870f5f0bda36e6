import { IANAZone } from 'luxon'
import type { Hospital } from '#shared/contracts/hospital.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { enqueue } from '../jobs/jobs.service.ts'
import { classLevels, setClassLevels } from '../review/classes.service.ts'
import { checkCalendar } from './calendars.service.ts'
import { findHospital, insertHospital, lockHospital, updateHospitalRow } from './hospital.repository.ts'
import { checkReach } from './reach.service.ts'

/** The organisation's settings. @throws {Problem} not-ready before they are made */
export async function readHospital(db: Reader): Promise<Hospital> {
  const row = await findHospital(db)
  if (!row) throw problem('not-ready', 'This hospital is not set up yet.')
  return {
    name: row.name,
    timeZone: row.timeZone,
    binWord: row.binWord,
    currency: row.currency,
    levels: await classLevels(db),
    floor: row.floorLevel,
    ceiling: row.ceilingLevel,
    twoPersons: row.isTwoPersons,
    vitalPolicyText: row.vitalPolicyText,
    vitalPolicyLink: row.vitalPolicyLink,
    resupplyPhone: row.resupplyPhone,
    orderingCost: row.orderingCost,
    holdingRatePerYear: row.holdingRatePerYear,
    calendarId: row.calendarId === null ? null : String(row.calendarId),
    pooling: row.isPooling,
    demo: row.isDemo,
  }
}

export const hospitalExists = async (db: Reader): Promise<boolean> => (await findHospital(db)) !== null

export async function createHospital(tx: Tx, clock: Clock, input: Hospital): Promise<void> {
  await insertHospital(tx, {
    id: 1,
    ...(await columnsOf(tx, input)),
    isDemo: input.demo,
    createdAt: clock.now(),
  })
  await setClassLevels(tx, input.levels)
}

/** The settings as their row keeps them. */
async function columnsOf(tx: Tx, hospital: Hospital) {
  const { levels: _own, floor, ceiling, twoPersons, pooling, calendarId, demo: _made, ...rest } = hospital
  return {
    ...rest,
    floorLevel: floor,
    ceilingLevel: ceiling,
    isTwoPersons: twoPersons,
    isPooling: pooling,
    calendarId: await checkCalendar(tx, calendarId),
  }
}

export async function updateHospital(tx: Tx, clock: Clock, actor: Actor, change: Partial<Hospital>): Promise<Hospital> {
  const before = await readHospital(tx)
  const after = { ...before, ...change }
  check(after, change)
  await updateHospitalRow(tx, await columnsOf(tx, after))
  if (after.calendarId !== before.calendarId) await checkReach(tx, clock.now(), '/calendarId')
  await setClassLevels(tx, after.levels)
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'hospital-changed',
    subject: 'hospital',
    subjectId: 1,
    before,
    after,
  })
  const recompute =
    change.levels ||
    change.timeZone ||
    after.calendarId !== before.calendarId ||
    change.orderingCost !== undefined ||
    change.holdingRatePerYear !== undefined
  if (recompute)
    await enqueue(tx, clock.now(), 'policy-all', { cause: change.levels ? 'service-level' : 'calendar' }, 'policy-all')
  // What like wards teach is made anew in the night's run only.
  if (after.pooling !== before.pooling)
    await enqueue(tx, clock.now(), 'policy-all', { cause: 'nightly' }, 'policy-all-nightly')
  return after
}

function check(after: Hospital, change: Partial<Hospital>): void {
  if (change.timeZone && !IANAZone.isValidZone(change.timeZone)) {
    throw fieldProblem('/timeZone', 'use a name such as Europe/London')
  }
  if (after.floor > after.ceiling) throw fieldProblem('/floor', 'the floor cannot be above the ceiling')
  for (const [ved, level] of Object.entries(after.levels)) {
    if (level < after.floor || level > after.ceiling) {
      throw fieldProblem(
        `/levels/${ved}`,
        `choose a level between the floor, ${after.floor}, and the ceiling, ${after.ceiling}`,
      )
    }
  }
}

/** Before a decision that two people must not make twice. */
export const oneAtATime = lockHospital
