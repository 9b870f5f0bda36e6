import AxeBuilder from '@axe-core/playwright'
import { expect, test, type Page } from '@playwright/test'
import { desk, launch, pageOf, phone, recordAs, signIn } from './support.ts'

/** What each role can open, by a path made from real ids. */
async function pathsOf(): Promise<Record<string, string[]>> {
  const record = await recordAs('coordinator')
  const room = (await record.rooms()).find((r) => r.code === 'ALD-1')!
  const bin = (await record.bins(`roomId=${room.id}`)).find((b) => b.item?.ved === 'V' && b.lastCount)!
  const { items: orders } = (await (await record.api.get('/api/v1/orders?pageSize=100')).json()) as {
    items: { id: string; state: string }[]
  }
  const order = orders.find((o) => o.state === 'draft') ?? orders[0]!
  const { items: calendars } = (await (await record.api.get('/api/v1/calendars')).json()) as { items: { id: string }[] }
  const { items: changes } = (await (await record.api.get('/api/v1/planned-changes?show=all')).json()) as {
    items: { id: string }[]
  }
  await record.api.dispose()
  return {
    nurse: [
      '/',
      '/count',
      `/count/room/${room.id}`,
      '/count/entries',
      '/rooms',
      `/rooms/${room.id}`,
      `/bins/${bin.id}`,
      '/me',
    ],
    coordinator: [
      '/',
      '/restock',
      '/restock/orders',
      `/restock/orders/${order.id}`,
      `/bins/${bin.id}`,
      '/hospital/items',
      `/hospital/items/${bin.itemId}`,
      '/hospital/bins/new',
      '/hospital/suppliers',
      '/hospital/calendars',
      '/hospital/calendars/new',
      ...calendars.slice(0, 1).map((calendar) => `/hospital/calendars/${calendar.id}`),
      '/planned-changes',
      '/planned-changes/new',
      ...changes.slice(0, 1).map((change) => `/planned-changes/${change.id}`),
      '/restock/holiday',
    ],
    reviewer: ['/', '/review', `/review/${bin.id}`, `/rooms/${room.id}`, '/planned-changes'],
    admin: ['/', '/hospital/people', '/hospital/settings', '/hospital/people/new'],
  }
}

/** Nothing on a page may run wider than the screen. */
const overflow = (page: Page): Promise<number> =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)

async function look(page: Page, path: string): Promise<void> {
  await page.goto(path)
  await expect(page.getByRole('heading').first()).toBeVisible()
  await expect(page.getByText(/Loading/)).toHaveCount(0)
  const found = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze()
  const said = found.violations.map(
    (v) =>
      `${v.id}: ${v.nodes
        .slice(0, 3)
        .map((n) => n.target.join(' '))
        .join(' | ')}`,
  )
  expect(said, path).toEqual([])
  expect(await overflow(page), `${path} is wider than the screen`).toBeLessThanOrEqual(0)
}

const settings = [
  { name: 'phone, day', viewport: phone, dark: false },
  { name: 'desktop, night', viewport: desk, dark: true },
]

for (const setting of settings) {
  test(`every page can be read and used: ${setting.name}`, async () => {
    // Some thirty pages, each looked through for faults of access.
    test.setTimeout(300_000)
    for (const [role, paths] of Object.entries(await pathsOf())) {
      const context = await launch(setting)
      const page = pageOf(context)
      const complaints: string[] = []
      page.on('pageerror', (error) => complaints.push(`${page.url()}: ${error.message}`))
      page.on('console', (message) => {
        if (message.type() === 'error') complaints.push(`${page.url()}: ${message.text()}`)
      })
      await signIn(page, role)
      for (const path of paths) await look(page, path)
      expect(complaints, role).toEqual([])
      await context.close()
    }
  })
}

test('the pages of a shift fit 320 pixels', async () => {
  const context = await launch({ viewport: { width: 320, height: 640 } })
  const page = pageOf(context)
  await signIn(page, 'nurse')
  const { nurse } = await pathsOf()
  for (const path of nurse!) {
    await page.goto(path)
    await expect(page.getByRole('heading').first()).toBeVisible()
    expect(await overflow(page), path).toBeLessThanOrEqual(0)
  }
  await context.close()
})

test('refusals are said where they belong', async () => {
  const context = await launch()
  const page = pageOf(context)
  await page.goto('/sign-in')
  await page.getByLabel('E-mail or staff code').fill('nurse@tallowmere.example')
  await page.getByLabel('Password', { exact: true }).fill('not the password')
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page.getByRole('alert')).toContainText('do not match')
  await signIn(page, 'nurse')
  await page.goto('/restock')
  await expect(page.getByRole('heading').first()).toBeVisible()
  await expect(page.getByRole('table')).toHaveCount(0)
  await page.goto('/bins/999999')
  await expect(page.getByText(/not found|no such/i).first()).toBeVisible()
  await context.close()
})
