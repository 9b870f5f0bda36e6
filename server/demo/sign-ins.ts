import { createHash, randomBytes } from 'node:crypto'
import type { Clock } from '../clock.ts'
import type { Db } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import type { ServerEnv } from '../env.ts'
import { verifyPassword } from '../people/passwords.ts'
import { updateUser } from '../people/people.service.ts'
import { people, type DemoPerson } from './catalogue/people.ts'
import { listMarkers, listStaff } from './demo.repository.ts'
import { marker } from './history-load.ts'

/** Known to everybody, so good on a machine's own loopback only. */
const knownPassword = 'brimline-demo'

const roleWords = {
  nurse: 'Ward staff',
  coordinator: 'Coordinator',
  reviewer: 'Reviewer',
  administrator: 'Administrator',
}

const shown = people.filter((p) => p.signIn)

/** Whether nobody but this machine can reach the server. */
export const isLocal = (env: Pick<ServerEnv, 'host' | 'production'>): boolean =>
  !env.production && (/^127\./.test(env.host) || env.host === '::1' || env.host === 'localhost')

const freshPassword = (): string => randomBytes(12).toString('base64url')

/** First passwords by staff code, and the lines that tell those nobody can know. */
export function firstPasswords(env: ServerEnv): { passwords: Map<string, string>; once: string[] } {
  const passwords = new Map(shown.map((p) => [p.staffCode, isLocal(env) ? knownPassword : freshPassword()]))
  return { passwords, once: isLocal(env) ? [] : shown.map((p) => onceLine(p, passwords.get(p.staffCode)!)) }
}

const columns = (p: DemoPerson): string =>
  `  ${roleWords[p.role].padEnd(14)} ${p.email.padEnd(36)} staff code ${p.staffCode}`
const onceLine = (p: DemoPerson, password: string): string => `${columns(p)}   password ${password}`
const fingerprint = (passwordHash: string): string => createHash('sha256').update(passwordHash).digest('hex')

/** Passwords this loading made up itself, by fingerprint of their hashes: they may be changed back. */
async function ownFingerprints(db: Db): Promise<Set<string>> {
  const markers = await listMarkers(db)
  return new Set(markers.filter((m) => m.action === 'demo-sign-ins').flatMap((m) => m.after as string[]))
}

/** Remembers random passwords as made here. */
export async function rememberOwn(db: Db, clock: Clock): Promise<void> {
  const codes = new Set(shown.map((p) => p.staffCode))
  const prints = (await listStaff(db)).filter((s) => codes.has(s.staffCode)).map((s) => fingerprint(s.passwordHash))
  await inTransaction(db, (tx) => marker(tx, clock.now(), 'demo-sign-ins', prints))
}

/**
 * Makes the sign-ins fit where the server listens, and says them: the known password on loopback, random ones (said
 * once) elsewhere. A password that a person chose is never touched.
 */
export async function settleSignIns(
  db: Db,
  clock: Clock,
  env: ServerEnv,
  say: (line: string) => void,
): Promise<string[]> {
  const staff = new Map((await listStaff(db)).map((s) => [s.staffCode, s]))
  const own = await ownFingerprints(db)
  const lines: string[] = []
  const once: string[] = []
  for (const person of shown) {
    const row = staff.get(person.staffCode)
    if (!row) continue
    const isKnown = await verifyPassword(row.passwordHash, knownPassword)
    const isOwn = own.has(fingerprint(row.passwordHash))
    const next = isLocal(env) ? (isOwn ? knownPassword : null) : isKnown ? freshPassword() : null
    if (next !== null) await setPassword(db, clock, row.id, next)
    if (next !== null && !isLocal(env)) once.push(onceLine(person, next))
    lines.push(`${columns(person)}${isLocal(env) && !isKnown && !isOwn ? '   with the password chosen since' : ''}`)
  }
  if (once.length) {
    await rememberOwn(db, clock)
    sayOnce(once, say)
  }
  const how = isLocal(env) ? `with the password ${knownPassword}` : 'with the passwords said when they were made'
  return [`Sign in to the demo hospital ${how}:`, ...lines]
}

/** Passwords that nobody can ask for again. */
export function sayOnce(lines: readonly string[], say: (line: string) => void): void {
  say('These passwords are said once, now:')
  for (const line of lines) say(line)
}

async function setPassword(db: Db, clock: Clock, id: number, password: string): Promise<void> {
  const actor = { id, role: 'administrator' as const, roomIds: null, authzVersion: 1 }
  await inTransaction(db, (tx) => updateUser(tx, clock, actor, id, { password }))
}
