import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { expect, test, type BrowserContext, type Page } from '@playwright/test'
import type { Bin } from '#shared/contracts/bins.ts'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { writeFakeCamera } from '../support/fake-camera.ts'
import { desk, launch, pageOf, recordAs, signIn, type Record } from './support.ts'

/** Enters a number on the keypad and answers whatever is asked by keeping it. */
async function enter(page: Page, number: number): Promise<void> {
  for (const digit of String(number)) await page.getByRole('button', { name: digit, exact: true }).click()
  await page.getByRole('button', { name: 'Save and next' }).click()
  const keep = page.getByRole('button', { name: new RegExp(`^(Keep ${number}|No, keep ${number}|None left)$`) })
  const asked = page.getByRole('dialog')
  if (await asked.isVisible().catch(() => false)) await keep.click()
}

const scanned = (page: Page, bin: Bin) =>
  expect(page.getByRole('heading', { name: bin.item!.name, exact: true })).toBeVisible()
const unsent = (page: Page, n: number) => expect(page.getByText(`${n} on this phone`).first()).toBeVisible()

/** A wedge scanner types fast and ends with Enter. */
async function wedge(page: Page, text: string): Promise<void> {
  await page.evaluate(async (typed) => {
    const send = (key: string, code: string): boolean =>
      document.body.dispatchEvent(new KeyboardEvent('keydown', { key, code, bubbles: true, cancelable: true }))
    for (const key of typed) {
      send(key, /[0-9]/.test(key) ? `Digit${key}` : `Key${key}`)
      await new Promise((done) => setTimeout(done, 8))
    }
    send('Enter', 'Enter')
  }, text)
}

test.describe.serial('from the shelf to the order', () => {
  let record: Record
  let low: Bin
  let second: Bin
  const profile = mkdtempSync(join(tmpdir(), 'brimline-nurse-'))
  const film = join(profile, 'label.y4m')
  let context: BrowserContext
  let page: Page
  let shortfall: number
  const counted = new Map<string, number>()

  test.beforeAll(async () => {
    record = await recordAs('coordinator')
    const ward = (await record.rooms()).find((r) => r.code === 'ALD-1')!
    const bins = await record.bins(`roomId=${ward.id}`)
    const calm = bins.filter(
      (b) =>
        b.states.includes('ok') &&
        b.states.length === 1 &&
        (b.reorderPoint ?? 0) >= 12 &&
        b.item!.ved !== 'V' &&
        b.onOrder === 0,
    )
    ;[low, second] = [calm[0]!, calm[1]!]
    writeFakeCamera(film, [{ text: low.code, symbology: 'qrcode' }])
  })
  test.afterAll(async () => {
    await context?.close()
    await record?.api.dispose()
  })

  test('a nurse counts without a network, by camera, by scanner and on foot', async () => {
    context = await launch({ folder: profile, camera: film })
    page = pageOf(context)
    await signIn(page, 'nurse')
    await page.goto(`/count/room/${low.roomId}`)
    await expect(page.getByRole('button', { name: 'Save and next' })).toBeVisible()
    await page.evaluate(() => navigator.serviceWorker.ready)
    await page.reload()
    await context.setOffline(true)
    await page.reload()
    await expect(page.getByRole('button', { name: 'Save and next' })).toBeVisible()

    await page
      .getByRole('button', { name: /Scan with the camera/ })
      .click({ timeout: 3_000 })
      .catch(() => undefined)
    await scanned(page, low)
    shortfall = 7
    counted.set(low.id, low.reorderPoint! - shortfall)
    await enter(page, low.reorderPoint! - shortfall)
    await unsent(page, 1)

    await page.getByRole('button', { name: 'Walk the shelf order instead of scanning' }).click()
    await wedge(page, second.code)
    await scanned(page, second)
    counted.set(second.id, second.onHand)
    await enter(page, second.onHand)
    await unsent(page, 2)

    for (let n = 3; n <= 5; n += 1) {
      await enter(page, 9)
      await unsent(page, n)
    }
  })

  test('closing the browser loses nothing, and the network brings each count in once', async () => {
    await context.close()
    context = await launch({ folder: profile, camera: film, offline: true })
    page = pageOf(context)
    await page.goto('/')
    const waiting = page.getByRole('link', { name: /entries not in the record yet/ })
    await expect(waiting).toContainText('5 entries')

    // The first reply is lost after the server has taken the batch in.
    let dropped = 0
    await context.route('**/api/v1/sync/operations', async (route) => {
      if (dropped > 0) return route.continue()
      dropped += 1
      await route.fetch()
      await route.abort()
    })
    const before = (await record.bins(`roomId=${low.roomId}`)).map((b) => [b.id, b.lastCount?.effectiveAt])
    await context.setOffline(false)
    await expect(waiting).toHaveCount(0, { timeout: 40_000 })
    expect(dropped).toBe(1)

    const after = await record.bins(`roomId=${low.roomId}`)
    const moved = after.filter((b) => b.lastCount?.effectiveAt !== before.find(([id]) => id === b.id)?.[1])
    expect(moved).toHaveLength(5)
    for (const [id, quantity] of counted) expect((await record.bin(id)).lastCount!.quantity).toBe(quantity)
    const ledger = (await (await record.api.get(`/api/v1/bins/${low.id}/movements?pageSize=500`)).json()) as {
      items: { type: string; quantity: number; effectiveAt: string }[]
    }
    const last = (await record.bin(low.id)).lastCount!
    expect(ledger.items.filter((m) => m.type === 'count' && m.effectiveAt === last.effectiveAt)).toHaveLength(1)
  })

  test('the coordinator sees the bin flagged with the right shortfall and orders', async () => {
    // The point is worked out anew within seconds of the count; then it stands still.
    let now = await record.bin(low.id)
    await expect(async () => {
      const before = now.reorderPoint
      await new Promise((done) => setTimeout(done, 1_500))
      now = await record.bin(low.id)
      expect(now.reorderPoint).toBe(before)
    }).toPass({ timeout: 30_000 })
    expect(now.states).toContain('below')
    expect(now.under).toBe(now.reorderPoint! - now.position)
    const office = await launch({ viewport: desk })
    const screen = pageOf(office)
    await signIn(screen, 'coordinator')
    await screen.goto('/restock')
    const row = screen
      .getByRole('row')
      .filter({ hasText: low.item!.name })
      .filter({ hasText: `${now.under} under` })
      .first()
    await expect(row).toBeVisible()
    await row.getByRole('button').first().click()
    await screen.getByRole('button', { name: /^Add \d/ }).click()
    await screen.getByRole('link', { name: 'Review and send' }).click()
    await screen.getByRole('button', { name: 'Send', exact: true }).click()
    await screen.getByRole('dialog').getByRole('button', { name: 'Send', exact: true }).click()
    await expect(screen.getByText(/is sent to/).first()).toBeVisible()
    const ordered = await record.bin(low.id)
    expect(ordered.onOrder).toBeGreaterThan(0)
    expect(ordered.states).toContain('on-order')
    await office.close()
  })

  test('the reviewer raises the aim of a vital item and the point moves as worked out', async () => {
    const reviewer = await recordAs('reviewer')
    const vital = (await reviewer.bins(`state=ok`)).filter((b) => b.item!.ved === 'V' && b.kind === 'counted')
    let target: Bin | undefined
    let policy: BinPolicy | undefined
    for (const bin of vital) {
      policy = (await (await reviewer.api.get(`/api/v1/bins/${bin.id}/policy`)).json()) as BinPolicy
      if (
        policy.mode !== 'calculated' ||
        policy.computed?.method !== 'negative-binomial-mixture' ||
        policy.serviceLevel.source !== 'class'
      )
        continue
      const raised = reorderPoint({ ...(policy.input as PolicyInput), serviceLevel: 0.999 }).reorderPoint!
      if (raised > policy.reorderPoint!) {
        target = bin
        break
      }
    }
    expect(target, 'a vital item whose point can move').toBeDefined()
    const room = await launch({ viewport: desk })
    const screen = pageOf(room)
    await signIn(screen, 'reviewer')
    await screen.goto(`/review/${target!.id}`)
    await screen.getByRole('radio', { name: /1 in 1,000/ }).check()
    await screen.getByLabel('Reason').fill('Two nights without in spring')
    await screen.getByLabel('Policy reference').fill('Supply policy 4.2')
    await screen.getByRole('button', { name: /^Set 1 in 1,000/ }).click()
    await expect(screen.getByText(/Reorder point/).first()).toBeVisible()
    const after = (await (await reviewer.api.get(`/api/v1/bins/${target!.id}/policy`)).json()) as BinPolicy
    expect(after.serviceLevel).toMatchObject({ target: 0.999, source: 'bin-override' })
    expect(after.reorderPoint).toBe(reorderPoint(after.input as PolicyInput).reorderPoint)
    expect(after.reorderPoint).toBeGreaterThan(policy!.reorderPoint!)
    await room.close()

    const nurse = await recordAs('nurse')
    const refused = await nurse.api.post(`/api/v1/bins/${low.id}/service-level`, {
      data: { level: 0.99, reason: 'r', policyReference: 'p', reviewBy: '2027-06-01' },
    })
    expect([refused.status(), ((await refused.json()) as { code: string }).code]).toEqual([403, 'not-allowed'])
    await nurse.api.dispose()
    await reviewer.api.dispose()
  })
})
