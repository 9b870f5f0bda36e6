import { expect, test, type Page } from '@playwright/test'
import type { BinPolicy } from '#shared/contracts/policy.ts'
import type { Order, WorklistRow } from '#shared/contracts/replenishment.ts'
import { base, desk, launch, pageOf, recordAs, signIn, type Record } from './support.ts'

/** What people press after the first count: deliveries, forms, proposals, the end of a shift. */
const orderOf = async (record: Record, id: string): Promise<Order> =>
  (await (await record.api.get(`/api/v1/orders/${id}`)).json()) as Order

/** An order on its way with one item for the nurse's room. */
async function sentOrder(record: Record): Promise<Order> {
  const room = (await record.rooms()).find((one) => one.code === 'ALD-1')!
  const list = await record.api.get(`/api/v1/worklist?roomId=${room.id}&pageSize=500`)
  const rows = ((await list.json()) as { items: WorklistRow[] }).items
  const row = rows.find((one) => one.supplierId !== null && one.inDraft === null && one.packSize > 1)!
  const lines = [{ binId: row.binId, packs: 1 }]
  const made = await record.api.post('/api/v1/orders', { data: { supplierId: row.supplierId, lines } })
  expect(made.status()).toBe(201)
  const { id } = (await made.json()) as Order
  expect((await record.api.post(`/api/v1/orders/${id}/send`)).ok()).toBe(true)
  return orderOf(record, id)
}

test('ward staff put a delivery away in two goes, and the order closes by itself', async () => {
  const record = await recordAs('coordinator')
  const order = await sentOrder(record)
  const line = order.lines[0]!
  const before = (await record.bin(line.binId)).onHand
  const context = await launch()
  const page = pageOf(context)
  await signIn(page, 'nurse')
  await page.goto(`/bins/${line.binId}`)
  const row = page.getByRole('listitem').filter({ hasText: order.number })
  await expect(row).toContainText(`${line.units} to come`)

  await row.getByRole('button', { name: 'Put away' }).click()
  const sheet = page.getByRole('dialog')
  await sheet.getByRole('button', { name: /^One less/ }).click()
  await sheet.getByRole('button', { name: new RegExp(`^Put away ${line.units - 1}`) }).click()
  await expect(page.getByText(/Saved on this phone/)).toBeVisible()
  await expect(row).toContainText('1 to come')
  await expect.poll(async () => (await orderOf(record, order.id)).state).toBe('part-received')

  await row.getByRole('button', { name: 'Put away' }).click()
  await sheet.getByRole('button', { name: /^Put away 1/ }).click()
  await expect.poll(async () => (await orderOf(record, order.id)).state).toBe('closed')
  await expect(row).toHaveCount(0)
  expect((await record.bin(line.binId)).onHand).toBe(before + line.units)
  await context.close()
  await record.api.dispose()
})

test('a refused field is said beside it, keeps what was typed, and is saved once mended', async () => {
  const context = await launch({ viewport: desk })
  const page = pageOf(context)
  await signIn(page, 'admin')
  await page.goto('/hospital/items/new')
  const typed = { Name: 'Flow swab 5 cm', Code: 'FLOW-1', 'Full name': 'Swab, 5 cm, flow', 'Count in': 'box' }
  for (const [label, text] of Object.entries(typed)) await page.getByLabel(label, { exact: true }).fill(text)
  await page.getByLabel('Ordered in', { exact: true }).fill('box')
  await page.getByLabel('Price of one unit of use', { exact: true }).fill('a lot')
  await page.getByRole('button', { name: 'Add a code' }).click()
  const gtin = page.locator('#field-gtins-0')
  await gtin.fill('5012345678901')
  const add = page.getByRole('button', { name: 'Add', exact: true })

  // The form itself knows what a number is.
  await add.click()
  await expect(page.locator('#field-price-error')).toContainText('a number')
  await page.getByLabel('Price of one unit of use', { exact: true }).fill('0.4')
  // The record knows what a barcode is.
  await add.click()
  await expect(page.getByText(/the last digit does not fit/).first()).toBeVisible()
  await expect(gtin).toHaveValue('5012345678901')
  await gtin.fill('5012345678900')
  await add.click()
  await expect(page.getByText('Added.')).toBeVisible()
  await expect(page.getByLabel('Name', { exact: true })).toHaveValue('Flow swab 5 cm')
  await context.close()
})

test('a coordinator proposes an aim, the second reviewer approves it, and the point follows', async () => {
  const record = await recordAs('coordinator')
  const vital = (await record.bins('state=ok')).filter((b) => b.item!.ved === 'V' && (b.reorderPoint ?? 0) > 8)
  let binId = ''
  for (const bin of vital) {
    const policy = (await (await record.api.get(`/api/v1/bins/${bin.id}/policy`)).json()) as BinPolicy
    if (policy.proposed !== null || policy.serviceLevel.source !== 'class' || policy.computed === null) continue
    binId = bin.id
    break
  }
  expect(binId, 'a vital place without an aim of its own').not.toBe('')
  const office = await launch({ viewport: desk })
  const screen = pageOf(office)
  await signIn(screen, 'coordinator')
  await screen.goto(`/review/${binId}`)
  await screen.getByRole('radio', { name: /1 in 1,000/ }).check()
  const propose = screen.getByRole('button', { name: /^Propose 1 in 1,000/ })
  await propose.click()
  await expect(screen.getByRole('link', { name: /^Reason/ })).toBeVisible()
  await screen.getByLabel('Reason').fill('Two nights without in spring')
  await screen.getByLabel('Policy reference').fill('Supply policy 4.2')
  await propose.click()
  await expect(screen.getByText(/Nothing changes until it is decided/)).toBeVisible()
  await expect(screen.getByRole('button', { name: 'Approve' })).toHaveCount(0)
  await office.close()

  const other = await launch()
  const page = pageOf(other)
  await signIn(page, 'second.reviewer')
  await page.goto(`/review/${binId}`)
  await expect(page.getByText('Two nights without in spring')).toBeVisible()
  await page.getByRole('button', { name: 'Approve' }).click()
  await expect(page.getByText(/Approved/)).toBeVisible()
  const after = (await (await record.api.get(`/api/v1/bins/${binId}/policy`)).json()) as BinPolicy
  expect(after.serviceLevel).toMatchObject({ target: 0.999, source: 'bin-override' })
  expect(after.proposed).toBeNull()
  await other.close()
  await record.api.dispose()
})

test('a reviewer says what an unusual stretch was, and takes it back', async () => {
  const record = await recordAs('coordinator')
  const asked = (await (await record.api.get('/api/v1/review?show=asked')).json()) as { items: { id: string }[] }
  const binId = asked.items[0]!.id
  const policy = async (): Promise<BinPolicy> =>
    (await (await record.api.get(`/api/v1/bins/${binId}/policy`)).json()) as BinPolicy
  const before = await policy()
  const context = await launch({ viewport: desk })
  const page = pageOf(context)
  await signIn(page, 'reviewer')
  await page.goto(`/bins/${binId}`)
  await page.getByRole('button', { name: 'A one-off event' }).first().click()
  const leaveOut = page.getByRole('button', { name: 'Leave it out' })
  await leaveOut.click()
  await expect(page.getByText('Say why, in a sentence.').first()).toBeVisible()
  await page.getByLabel('Reason').fill('A neighbouring ward was moved here for a week')
  await leaveOut.click()
  await expect(page.getByText(/^Left out\./)).toBeVisible()
  const after = await policy()
  expect(after.questions).toHaveLength(before.questions.length - 1)
  expect(after.exclusions.map((e) => e.kind)).toContain('excluded')
  expect(after.intervals.filter((i) => i.why === 'excluded').length).toBeGreaterThan(0)

  await page.getByRole('button', { name: /^Let it count again/ }).click()
  await page.getByLabel('Reason').fill('It may come again')
  await page.getByRole('button', { name: 'Let it count again', exact: true }).last().click()
  await expect(page.getByText(/^Ended\./)).toBeVisible()
  expect((await policy()).computed!.reorderPoint).toBe(before.computed!.reorderPoint)
  await context.close()
  await record.api.dispose()
})

/** Leaves `n` counts on the phone without a network. */
async function countOffline(page: Page, n: number): Promise<void> {
  for (let done = 1; done <= n; done += 1) {
    await page.getByRole('button', { name: '9', exact: true }).click()
    await page.getByRole('button', { name: 'Save and next' }).click()
    const keep = page.getByRole('dialog').getByRole('button', { name: /^(Keep 9|No, keep 9)$/ })
    await expect(keep.or(page.getByText(`${done} on this phone`)).first()).toBeVisible()
    if (await keep.isVisible()) await keep.click()
    await expect(page.getByText(`${done} on this phone`).first()).toBeVisible()
  }
}

test('signing out warns about unsent counts, and nobody else can send them', async () => {
  const record = await recordAs('coordinator')
  const room = (await record.rooms()).find((one) => one.code === 'ALD-2')!
  const stamps = async (): Promise<number> =>
    (await record.bins(`roomId=${room.id}`)).filter((b) => b.lastCount?.quantity === 9).length
  const context = await launch()
  const page = pageOf(context)
  await signIn(page, 'nurse')
  await page.goto(`/count/room/${room.id}?all=1`)
  await expect(page.getByRole('button', { name: 'Save and next' })).toBeVisible()
  await page.evaluate(() => navigator.serviceWorker.ready)
  await page.reload()
  const before = await stamps()
  await context.setOffline(true)
  await countOffline(page, 2)

  await page.goto('/me')
  await page.getByRole('button', { name: 'Sign out' }).click()
  await expect(page.getByRole('dialog')).toContainText('2 entries not in the record yet')
  await page.getByRole('button', { name: 'Sign out anyway' }).click()
  await expect(page.getByText(/2 unsent entries by N\.F\./)).toBeVisible()

  await context.setOffline(false)
  await signIn(page, 'coordinator')
  await page.goto('/count/entries')
  await expect(page.getByText('2 unsent entries by N.F.')).toBeVisible()
  await expect(page.getByRole('button', { name: 'Send now' })).toHaveCount(0)
  expect(await stamps()).toBe(before)
  await page.goto('/me')
  await page.getByRole('button', { name: 'Sign out' }).click()
  await page.waitForURL(`${base}/sign-in`)

  await signIn(page, 'nurse')
  await expect.poll(stamps, { timeout: 20_000 }).toBeGreaterThan(before)
  await page.goto('/count/entries')
  await expect(page.getByText('Everything is in the record.')).toBeVisible()
  await context.close()
  await record.api.dispose()
})
