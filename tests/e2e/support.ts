import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { chromium, expect, request, type APIRequestContext, type BrowserContext, type Page } from '@playwright/test'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Room } from '#shared/contracts/catalogue.ts'

export const base = process.env.E2E_URL ?? 'http://127.0.0.1:4387'
export const password = 'brimline-demo'

export const phone = { width: 390, height: 844 }
export const desk = { width: 1440, height: 900 }

const flags = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

interface Launch {
  folder?: string
  /** A film for the fake camera. */
  camera?: string
  offline?: boolean
  viewport?: { width: number; height: number }
  dark?: boolean
}

/** Debian's Chromium with a profile of its own: what it keeps survives a restart, as on a phone. */
export async function launch(options: Launch = {}): Promise<BrowserContext> {
  const camera = options.camera
    ? [
        '--use-fake-ui-for-media-stream',
        '--use-fake-device-for-media-stream',
        `--use-file-for-fake-video-capture=${options.camera}`,
      ]
    : []
  return chromium.launchPersistentContext(options.folder ?? mkdtempSync(join(tmpdir(), 'brimline-profile-')), {
    executablePath: '/usr/bin/chromium',
    args: [...flags, ...camera],
    baseURL: base,
    viewport: options.viewport ?? phone,
    colorScheme: options.dark ? 'dark' : 'light',
    offline: options.offline ?? false,
    timezoneId: 'Europe/London',
    locale: 'en-GB',
  })
}

export const pageOf = (context: BrowserContext): Page => context.pages()[0]!

export async function signIn(page: Page, who: string): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel('E-mail or staff code').fill(`${who}@tallowmere.example`)
  await page.getByLabel('Password', { exact: true }).fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'))
}

/** The record itself, asked past the screens. */
export interface Record {
  api: APIRequestContext
  rooms(): Promise<Room[]>
  bins(query: string): Promise<Bin[]>
  bin(id: string): Promise<Bin>
}

export async function recordAs(who: string): Promise<Record> {
  const api = await request.newContext({ baseURL: base, extraHTTPHeaders: { 'X-Brimline': '1' } })
  const reply = await api.post('/api/v1/session', { data: { email: `${who}@tallowmere.example`, password } })
  expect(reply.status()).toBe(201)
  const list = async <T>(path: string): Promise<T[]> =>
    ((await (await api.get(`/api/v1${path}`)).json()) as { items: T[] }).items
  return {
    api,
    rooms: () => list<Room>('/rooms?pageSize=500'),
    bins: (query) => list<Bin>(`/bins?pageSize=500&${query}`),
    bin: async (id) => (await (await api.get(`/api/v1/bins/${id}`)).json()) as Bin,
  }
}
