// `npm run rebuild`: recomputes levels and intervals from the ledger and policies from their inputs; reports differences.
import { ensureBuilt } from './build.mjs'
import { ensureMariadb, startMariadb } from './mariadb.mjs'
import { ensureModules } from './modules.mjs'
import { dataDir, inRoot } from './paths.mjs'
import { say } from './say.mjs'

const folder = dataDir()
await ensureModules()
await ensureBuilt(['server'])
let database = null
if (!process.env.DATABASE_URL) {
  await ensureMariadb()
  database = await startMariadb(folder)
  process.env.DATABASE_URL = database.appUrl
  process.env.DATABASE_ADMIN_URL = database.ownerUrl
}
process.env.DATA_DIR = folder
const { rebuild } = await import(inRoot('.build/server/main.js'))
try {
  const differences = await rebuild(process.env, say)
  process.exitCode = differences ? 1 : 0
} finally {
  // A database that was running before belongs to a running Brimline.
  if (database && !database.adopted) await database.stop()
}
