import { defineConfig } from '@playwright/test'
import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

const port = Number(process.env.E2E_PORT ?? 4387)
// Every worker process reads this file; the folder is made once and handed on.
process.env.E2E_DATA_DIR ??= mkdtempSync(join(tmpdir(), 'brimline-e2e-'))
process.env.E2E_URL ??= `http://127.0.0.1:${port}`

export default defineConfig({
  testDir: fileURLToPath(new URL('../tests/e2e', import.meta.url)),
  outputDir: fileURLToPath(new URL('../.tmp/playwright', import.meta.url)),
  fullyParallel: false,
  workers: 1,
  timeout: 120_000,
  expect: { timeout: 15_000 },
  use: { baseURL: process.env.E2E_URL, trace: 'off', screenshot: 'only-on-failure' },
  webServer: {
    command: 'node server/setup/start.mjs',
    cwd: fileURLToPath(new URL('..', import.meta.url)),
    url: `${process.env.E2E_URL}/readyz`,
    timeout: 180_000,
    reuseExistingServer: false,
    stdout: 'ignore',
    stderr: 'pipe',
    gracefulShutdown: { signal: 'SIGTERM', timeout: 10_000 },
    env: {
      PORT: String(port),
      DATA_DIR: process.env.E2E_DATA_DIR,
      DEMO: 'yes',
      DATABASE_URL: '',
      DATABASE_ADMIN_URL: '',
    },
  },
})
