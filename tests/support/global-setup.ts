import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

interface Started {
  ownerUrl: string
  stop(): Promise<void>
}

/** One throw-away MariaDB for the run, unless `npm test` has started one already. */
export default async function setup(): Promise<(() => Promise<void>) | undefined> {
  if (process.env.TEST_DATABASE_URL) return undefined
  const { ensureMariadb, startMariadb } = (await import('../../server/setup/mariadb.mjs' as string)) as {
    ensureMariadb(): Promise<void>
    startMariadb(folder: string, options: { extra: string[] }): Promise<Started>
  }
  await ensureMariadb()
  const folder = mkdtempSync(join(tmpdir(), 'brimline-vitest-'))
  const server = await startMariadb(folder, { extra: ['--innodb-flush-log-at-trx-commit=0'] })
  process.env.TEST_DATABASE_URL = server.ownerUrl
  return async () => {
    await server.stop()
    rmSync(folder, { recursive: true, force: true })
  }
}
