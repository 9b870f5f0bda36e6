// The entry of `npm start`: plain Node, because it runs before node_modules exists.
import { lockFolder } from './lock.mjs'
import { ensureBuilt } from './build.mjs'
import { ensureMariadb, startMariadb } from './mariadb.mjs'
import { ensureModules } from './modules.mjs'
import { dataDir, inRoot } from './paths.mjs'
import { giveUp, say } from './say.mjs'

const folder = dataDir()
const unlock = lockFolder(folder)
const stops = []

let stopping = false
async function stopAll(code) {
  if (stopping) return
  stopping = true
  for (const stop of stops.reverse()) await stop().catch((error) => say(`While stopping: ${error.message}`))
  unlock()
  process.exit(code)
}
process.on('SIGINT', () => void stopAll(0))
process.on('SIGTERM', () => void stopAll(0))
process.on('SIGHUP', () => void stopAll(0))
process.on('exit', unlock)

await ensureModules()
await ensureBuilt()
let database = null
if (!process.env.DATABASE_URL) {
  await ensureMariadb()
  database = await startMariadb(folder)
  stops.push(database.stop)
  say(`Database ready on 127.0.0.1:${database.port}.`)
}
if (database) process.env.DATABASE_URL = database.appUrl
if (database) process.env.DATABASE_ADMIN_URL = database.ownerUrl
process.env.DATA_DIR = folder
process.setSourceMapsEnabled(true)
try {
  const { serve } = await import(inRoot('.build/server/main.js'))
  const server = await serve(process.env, {
    say,
    clientDir: inRoot('.build/client'),
    migrations: inRoot('drizzle'),
    embedded: database !== null,
  })
  stops.push(server.stop)
} catch (error) {
  process.stderr.write(`${error?.plain ? error.message : (error?.stack ?? error)}\n`)
  await stopAll(1)
  giveUp('Brimline did not start.')
}
