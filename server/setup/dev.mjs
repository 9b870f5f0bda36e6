// `npm run dev`: Vite with hot reload, the server in watch mode, one database beneath.
import { spawn } from 'node:child_process'
import { lockFolder } from './lock.mjs'
import { ensureMariadb, startMariadb } from './mariadb.mjs'
import { ensureModules } from './modules.mjs'
import { dataDir, inRoot, root } from './paths.mjs'
import { say } from './say.mjs'

const folder = dataDir()
const unlock = lockFolder(folder)
await ensureModules()
await ensureMariadb()
const database = process.env.DATABASE_URL ? null : await startMariadb(folder)
const port = process.env.PORT || '4310'
const env = {
  ...process.env,
  BRIMLINE_API: `http://127.0.0.1:${port}`,
  DATA_DIR: folder,
  ...(database ? { DATABASE_URL: database.appUrl, DATABASE_ADMIN_URL: database.ownerUrl } : {}),
}
const children = [
  spawn(process.execPath, ['--import', 'tsx', '--watch', inRoot('server/main.ts')], {
    cwd: root,
    env,
    stdio: 'inherit',
  }),
  spawn(process.execPath, [inRoot('node_modules/vite/bin/vite.js')], { cwd: root, env, stdio: 'inherit' }),
]
say(`Development pages on http://127.0.0.1:5173, the server behind them on http://127.0.0.1:${port}.`)

let stopping = false
async function stopAll() {
  if (stopping) return
  stopping = true
  for (const child of children) child.kill('SIGTERM')
  await Promise.all(
    children.map((child) => (child.exitCode !== null ? null : new Promise((done) => child.once('exit', done)))),
  )
  await database?.stop()
  unlock()
  process.exit(0)
}
process.on('SIGINT', () => void stopAll())
process.on('SIGTERM', () => void stopAll())
