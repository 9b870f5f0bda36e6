import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import { hostname } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { checkStatistics } from '#shared/stats/self-check.ts'
import { createApp } from './app.ts'
import { systemClock, type Clock } from './clock.ts'
import { newestRecord } from './counts/levels.service.ts'
import { openDatabase, type Database } from './db/client.ts'
import { migrateDatabase, unsafeSettings } from './db/migrate.ts'
import { ensureFirstData } from './demo/first-data.ts'
import { readEnv, type ServerEnv } from './env.ts'
import type { AppDeps } from './http/context.ts'
import { jobHandlers, scheduleNightly } from './jobs/handlers.ts'
import { runOne, startWorker } from './jobs/jobs.service.ts'
import { sendDue } from './mail/mail.service.ts'
import { fileTransport, smtpTransport } from './mail/transport.ts'
import { sweepPeople } from './people/people.service.ts'
import { rebuildAll } from './policy/rebuild.service.ts'

interface Around {
  say: (line: string) => void
  clientDir: string | null
  migrations: string
  /** The database was started by the command, on loopback. */
  embedded: boolean
}

/** A failure that is one sentence for the person at the terminal. */
class Plain extends Error {
  readonly plain = true
}

/** Brings one server up: settings → tables → first data → app → jobs. @returns how to stop it */
export async function serve(
  source: NodeJS.ProcessEnv,
  around: Around,
): Promise<{ stop: () => Promise<void>; url: string }> {
  const env = settings(source)
  // A library that came in with another version and gives other figures must not decide on reorder points.
  checkStatistics()
  const { protectedByRights } = await migrateDatabase({
    adminUrl: env.adminUrl,
    appUrl: env.databaseUrl,
    folder: around.migrations,
  })
  if (!protectedByRights)
    around.say(
      'Note: one database account for everything, so rights do not protect the ledger. Set DATABASE_ADMIN_URL.',
    )
  const unsafe = env.production ? await unsafeSettings(env.databaseUrl) : []
  if (unsafe.length) throw new Plain(`The database is not safe enough for production: ${unsafe.join('; ')}.`)
  const database = openDatabase(env.databaseUrl)
  const clock = await checkedClock(database, env)
  const signIns = await ensureFirstData(database.db, clock, env, around.embedded, around.say)
  const deps: AppDeps = {
    db: database.db,
    clock,
    dataDir: env.dataDir,
    clientDir: around.clientDir,
    sessionSecrets: sessionSecrets(env),
    publicUrl: env.publicUrl,
    trustProxy: env.trustProxy,
    logLevel: env.logLevel,
  }
  const server = await listen(createServer(createApp(deps).app), env)
  const worker = startJobs(deps, env)
  const address = server.address()
  const port = typeof address === 'object' && address ? address.port : env.port
  const url = env.publicUrl ?? `http://${env.host}:${port}`
  around.say(`Brimline is ready: ${url}`)
  for (const line of signIns) around.say(line)
  return {
    url,
    async stop() {
      const closed = new Promise<void>((resolve) => server.close(() => resolve()))
      server.closeIdleConnections()
      const impatient = setTimeout(() => server.closeAllConnections(), 5_000)
      await Promise.all([closed, worker.stop()])
      clearTimeout(impatient)
      await database.close()
    },
  }
}

function settings(source: NodeJS.ProcessEnv): ServerEnv {
  try {
    return readEnv(source)
  } catch (error) {
    throw new Plain(error instanceof Error ? error.message : String(error))
  }
}

/** A clock behind the ledger would write entries into the past of others. */
async function checkedClock(database: Database, env: ServerEnv): Promise<Clock> {
  const newest = await newestRecord(database.db)
  if (env.clockNow && newest && env.clockNow < newest) {
    throw new Plain(
      `Setting CLOCK_NOW: the ledger reaches to ${newest.toISOString()}; choose that moment or a later one.`,
    )
  }
  return systemClock(env.clockNow)
}

/** Given, several for a change of secret (newest first, comma between); else made once and kept. */
function sessionSecrets(env: ServerEnv): string[] {
  if (env.sessionSecret)
    return env.sessionSecret
      .split(',')
      .map((s) => s.trim())
      .filter(Boolean)
  const file = join(env.dataDir, 'session-secret')
  mkdirSync(env.dataDir, { recursive: true })
  if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600 })
  return [readFileSync(file, 'utf8').trim()]
}

function listen(server: Server, env: ServerEnv): Promise<Server> {
  server.requestTimeout = 25_000
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      const taken = error.code === 'EADDRINUSE'
      reject(taken ? new Plain(`Port ${env.port} is in use. Stop what uses it, or set PORT.`) : error)
    })
    server.listen(env.port, env.host, () => resolve(server))
  })
}

function startJobs(deps: AppDeps, env: ServerEnv) {
  const owner = `${hostname()}-${process.pid}`
  const { 'policy-all': wholeRun, ...short } = jobHandlers(deps.db, deps.clock)
  const transport = env.smtpUrl ? smtpTransport(env.smtpUrl) : fileTransport(env.dataDir)
  let swept = 0
  const onError = (error: unknown): void => {
    process.stderr.write(`A job failed and is tried again: ${error instanceof Error ? error.message : String(error)}\n`)
  }
  // A run over every place has a loop of its own: what a count changes must not wait for it.
  const runs = startWorker(
    [() => runOne(deps.db, deps.clock, { 'policy-all': wholeRun! }, `${owner}-run`)],
    2_000,
    onError,
  )
  const work = startWorker(
    [
      () => runOne(deps.db, deps.clock, short, owner),
      async () => (await sendDue(deps.db, deps.clock, transport, owner)) > 0,
      async () => {
        const now = deps.clock.now().getTime()
        if (now - swept < 600_000 && now >= swept) return false
        swept = now
        await sweepPeople(deps.db, deps.clock)
        await scheduleNightly(deps.db, deps.clock)
        return false
      },
    ],
    400,
    onError,
  )
  return {
    async stop() {
      await Promise.all([work.stop(), runs.stop()])
    },
  }
}

/** Recomputes every projection and reports what differs. @returns the number of differences */
export async function rebuild(source: NodeJS.ProcessEnv, say: (line: string) => void): Promise<number> {
  const env = settings(source)
  const database = openDatabase(env.databaseUrl)
  try {
    return await rebuildAll(database.db, systemClock(env.clockNow), say)
  } finally {
    await database.close()
  }
}

// Under `npm run dev` this file runs by itself.
if (process.argv[1] === fileURLToPath(import.meta.url) && process.argv[1].endsWith('.ts')) {
  const server = await serve(process.env, {
    say: (line) => process.stdout.write(`${line}\n`),
    clientDir: null,
    migrations: 'drizzle',
    embedded: true,
  })
  process.on('SIGTERM', () => void server.stop().then(() => process.exit(0)))
}
