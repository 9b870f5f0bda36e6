import { DateTime } from 'luxon'
import { hospitalExists, readHospital } from '../catalogue/hospital.service.ts'
import { movableClock, type Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import type { ServerEnv } from '../env.ts'
import { observeAllLeadTimes } from '../replenishment/lead-times.service.ts'
import { loadCatalogue } from './catalogue-load.ts'
import { alone, listMarkers, listTouched } from './demo.repository.ts'
import { makeEmptyHospital } from './empty-hospital.ts'
import { decide } from './decisions.ts'
import { loadFirstHistory, marker } from './history-load.ts'
import { liveOn } from './live-on.ts'
import { computeDemoPolicies } from './policies.ts'
import { settleWorklist, shortAbsenceMs } from './settle-worklist.ts'
import { firstPasswords, isLocal, rememberOwn, sayOnce, settleSignIns } from './sign-ins.ts'
import { demoZone } from './simulation/simulator.ts'

type Say = (line: string) => void

/**
 * What has to be in the database before anybody can sign in. An empty database gets the demo hospital, or an empty
 * hospital with one administrator; a demo hospital lives on to this moment. May be cut short at any point and is taken
 * up by the next start.
 *
 * @returns lines with the demo's sign-ins
 */
export function ensureFirstData(db: Db, clock: Clock, env: ServerEnv, embedded: boolean, say: Say): Promise<string[]> {
  return alone(db, async () => {
    if (!(await hospitalExists(db))) {
      const wantsDemo = env.demo === 'yes' || (env.demo === null && embedded)
      if (!wantsDemo) {
        await makeEmptyHospital(db, clock, say)
        return []
      }
      await makeDemoHospital(db, clock, env, say)
    }
    if (!(await readHospital(db)).demo) {
      if (env.demo === 'yes')
        say('This database holds a hospital of its own; the demo hospital is loaded into an empty one only.')
      return []
    }
    if (env.demo !== 'no') await bringUp(db, clock, say)
    else say('This database holds the demo hospital. For an empty one choose another DATA_DIR or DATABASE_URL.')
    return settleSignIns(db, clock, env, say)
  })
}

const historyDays = 181

/** Everything that stands before the first count, in one transaction. */
async function makeDemoHospital(db: Db, clock: Clock, env: ServerEnv, say: Say): Promise<void> {
  const to = clock.now()
  const local = DateTime.fromJSDate(to, { zone: demoZone }).startOf('day')
  const began = local.minus({ days: historyDays }).toJSDate()
  say('Making the demo hospital, Tallowmere General: 180 days of counts and orders. This takes less than a minute.')
  const { passwords, once } = firstPasswords(env)
  await inTransaction(db, async (tx) => {
    await loadCatalogue({ tx, clock: movableClock(began), to, passwords, say })
    await marker(tx, to, 'demo-made', { began: began.toISOString(), to: to.toISOString() })
  })
  if (!isLocal(env)) {
    await rememberOwn(db, clock)
    sayOnce(once, say)
  }
}

interface Progress {
  began: number
  to: number
  hasOrders: boolean
  hasDecided: boolean
  livedTo: number | null
  settledTo: number | null
}

async function progressOf(db: Db): Promise<Progress> {
  const markers = await listMarkers(db)
  const newest = (action: string) =>
    markers.find((m) => m.action === action)?.after as Record<string, string> | undefined
  const moment = (text: string | undefined): number | null => (text === undefined ? null : Date.parse(text))
  const made = newest('demo-made')
  if (!made) throw new Error('The demo hospital has no record of how it was made.')
  return {
    began: Date.parse(made.began!),
    to: Date.parse(made.to!),
    hasOrders: newest('demo-orders') !== undefined,
    hasDecided: newest('demo-decided') !== undefined,
    livedTo: moment(newest('demo-lived')?.to),
    settledTo: moment(newest('demo-settled')?.to),
  }
}

/** Takes the demo hospital from wherever it stands to this moment. */
async function bringUp(db: Db, clock: Clock, say: Say): Promise<void> {
  const before = await progressOf(db)
  if (before.livedTo === null) await loadFirstHistory(db, clock, before, say)
  if (!before.hasDecided) await decide(db, clock)
  const { began, livedTo, settledTo } = await progressOf(db)
  const from = livedTo ?? before.to
  await tryToLiveOn(db, clock, { began, from }, say)
  const now = (await progressOf(db)).livedTo ?? from
  if (settledTo === now) return
  await observeAllLeadTimes(db)
  await computeDemoPolicies(db, clock, say)
  const since = settledTo ?? began
  const touched = await listTouched(db, new Date(since))
  await settleWorklist(db, clock, { to: new Date(now), touched, isShort: now - since < shortAbsenceMs })
}

/** People may have turned the demo inside out; it then stays as they left it, whole, rather than stop the start. */
async function tryToLiveOn(db: Db, clock: Clock, span: { began: number; from: number }, say: Say): Promise<void> {
  try {
    if (await liveOn(db, clock, span)) say('The demo hospital has lived on to this moment.')
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error)
    say(`The demo hospital stands as it was left; it could not live on: ${why.slice(0, 300)}`)
  }
}
