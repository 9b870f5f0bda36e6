// `npm run bench [name …]`: each benchmark as a ratio against its reference in the same run.
import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ensureMariadb, startMariadb } from './mariadb.mjs'
import { ensureModules } from './modules.mjs'
import { inRoot, root } from './paths.mjs'
import { run } from './say.mjs'

await ensureModules()
await ensureMariadb()
const all = readdirSync(inRoot('tests/bench')).flatMap((file) => /^(.+)\.bench\.ts$/.exec(file)?.[1] ?? [])
const asked = process.argv.slice(2)
const folder = mkdtempSync(join(tmpdir(), 'brimline-bench-'))
const database = await startMariadb(folder)
try {
  for (const name of asked.length ? asked : all) {
    const script = inRoot('tests/bench', `${name}.bench.ts`)
    await run(process.execPath, ['--import', 'tsx', script], {
      cwd: root,
      env: { TEST_DATABASE_URL: database.ownerUrl },
      show: true,
    })
  }
} finally {
  await database.stop()
  rmSync(folder, { recursive: true, force: true })
}
