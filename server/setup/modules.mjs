import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { inRoot, root } from './paths.mjs'
import { giveUp, run, say, since } from './say.mjs'

const stamp = inRoot('node_modules/.brimline-lock')

/** Installs what package-lock.json names, when it is missing or another lock was installed before. */
export async function ensureModules() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major < 20 || (major === 20 && minor < 19))
    giveUp(`Brimline needs Node 20.19 or newer; this is ${process.versions.node}.`)
  const lock = createHash('sha256')
    .update(readFileSync(inRoot('package-lock.json')))
    .digest('hex')
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === lock) return
  const start = Date.now()
  say('Installing node modules (about a minute) …')
  await run('npm', ['ci', '--ignore-scripts', '--no-audit', '--no-fund'], { title: 'npm ci', cwd: root }).catch(
    (error) => {
      giveUp(`Node modules could not be installed. Check the network, then try again.\n${error.message}`)
    },
  )
  mkdirSync(inRoot('node_modules'), { recursive: true })
  writeFileSync(stamp, lock)
  say(`Node modules installed, ${since(start)}.`)
}
