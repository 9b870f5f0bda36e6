// `npm test`: sets up what is missing, starts throw-away databases, runs everything, ends with the sum.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { spawn } from 'node:child_process'
import { ensureBuilt } from './build.mjs'
import { ensureMariadb, startMariadb } from './mariadb.mjs'
import { ensureModules } from './modules.mjs'
import { ensurePackages } from './packages.mjs'
import { inRoot, root } from './paths.mjs'
import { say, since } from './say.mjs'

const start = Date.now()
await ensureModules()
await ensureMariadb()
await ensurePackages(['chromium'], ['chromium'], 'Chromium')
await ensureBuilt()

const folder = mkdtempSync(join(tmpdir(), 'brimline-test-'))
// Throw-away data need no flush at each commit.
const database = await startMariadb(join(folder, 'db'), {
  extra: ['--innodb-flush-log-at-trx-commit=0', '--skip-log-bin'],
})
const env = {
  ...process.env,
  TEST_DATABASE_URL: database.ownerUrl,
  DATA_DIR: join(folder, 'data'),
  CI: '1',
  FORCE_COLOR: '0',
}

function show(command, args) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, [inRoot('node_modules', command), ...args], {
      cwd: root,
      env,
      stdio: 'inherit',
    })
    for (const signal of ['SIGINT', 'SIGTERM']) process.once(signal, () => child.kill(signal))
    child.on('exit', (code) => resolve(code ?? 1))
  })
}

const sum = { passed: 0, failed: 0 }
const read = (file) => {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    return null
  }
}

const only = process.argv.slice(2)
const unitFile = join(folder, 'unit.json')
const unit = await show('vitest/vitest.mjs', [
  'run',
  '--reporter=default',
  '--reporter=json',
  `--outputFile.json=${unitFile}`,
  ...only,
])
const units = read(unitFile)
sum.passed += units?.numPassedTests ?? 0
sum.failed += units?.numFailedTests ?? 0
// A file that does not load runs no test: that is a failure too.
if (unit !== 0 && !units?.numFailedTests) sum.failed += 1

if (only.length === 0) {
  const browserFile = join(folder, 'browser.json')
  env.PLAYWRIGHT_JSON_OUTPUT_NAME = browserFile
  const browser = await show('@playwright/test/cli.js', [
    'test',
    '-c',
    '.config/playwright.config.ts',
    '--reporter=list,json',
  ])
  const stats = read(browserFile)?.stats
  sum.passed += (stats?.expected ?? 0) + (stats?.flaky ?? 0)
  sum.failed += stats?.unexpected ?? 0
  if (browser !== 0 && !stats?.unexpected) sum.failed += 1
}

await database.stop()
rmSync(folder, { recursive: true, force: true })
say(`All tests took ${since(start)}.`)
say(`${sum.passed} passed, ${sum.failed} failed`)
process.exit(sum.failed || sum.passed === 0 ? 1 : 0)
