import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createApp, nextTick, type App } from 'vue'
import { addExclusion, setPoolWard } from '#shared/contracts/policy.ts'
import UseQuestion from '#src/components/policy/UseQuestion.vue'
import { mayCall } from '#src/components/policy/may-call.ts'
import { startOfDay } from '#src/components/policy/start-of-day.ts'

const question = {
  closingOpId: 'op-9',
  from: '2026-05-03T06:00:00.000Z',
  to: '2026-05-10T06:10:00.000Z',
  quantity: 96,
  expected: 20.4,
}
const at = { now: '2026-05-14T10:00:00.000Z', zone: 'Europe/London' }
const fetching = vi.fn<typeof fetch>()
let app: App
let root: HTMLElement

function open(may: boolean, more: Record<string, unknown> = {}): void {
  app = createApp(UseQuestion, { binId: '7', question, may, at, ...more })
  app.mount(root)
}
const press = async (words: string): Promise<void> => {
  const button = [...root.querySelectorAll('button')].find((one) => one.textContent?.trim() === words)
  if (!button) throw new Error(`no button “${words}”`)
  button.click()
  await nextTick()
}
async function submit(reason: string): Promise<void> {
  const field = root.querySelector('input')!
  field.value = reason
  field.dispatchEvent(new Event('input'))
  root.querySelector('form')!.dispatchEvent(new Event('submit', { cancelable: true }))
  await nextTick()
}

beforeEach(() => {
  setActivePinia(createPinia())
  fetching.mockReset()
  vi.stubGlobal('fetch', fetching)
  root = document.body.appendChild(document.createElement('div'))
})
afterEach(() => {
  app.unmount()
  root.remove()
  vi.unstubAllGlobals()
})

describe('an unusual stretch', () => {
  it('is shown to everybody, and answered only by those who may', () => {
    open(false)
    expect(root.textContent).toContain('96 went, about 20 would be usual. What was it?')
    expect(root.querySelectorAll('button')).toHaveLength(0)
    for (const role of ['coordinator', 'reviewer', 'administrator'] as const)
      expect(mayCall(addExclusion, role)).toBe(true)
    expect(mayCall(addExclusion, 'nurse')).toBe(false)
    expect(mayCall(addExclusion, null)).toBe(false)
    expect(mayCall(setPoolWard, 'administrator')).toBe(false)
  })

  it('asks for a reason at the field and sends nothing without one', async () => {
    open(true)
    await press('A one-off event')
    expect(document.activeElement?.tagName).toBe('INPUT')
    await submit('   ')
    expect(root.querySelector('.error')?.textContent).toContain('Say why, in a sentence.')
    expect(root.querySelector('input')?.getAttribute('aria-invalid')).toBe('true')
    expect(fetching).not.toHaveBeenCalled()
  })

  it('says what the record refused, keeps the words, and names the stretch in what it sends', async () => {
    const answered = vi.fn()
    open(true, { onAnswered: answered })
    const errors = [{ pointer: '/from', detail: 'that stretch is left out already' }]
    fetching.mockResolvedValue(
      new Response(JSON.stringify({ code: 'invalid', status: 422, title: 'Not taken', errors }), {
        status: 422,
        headers: { 'Content-Type': 'application/problem+json', 'X-Brimline': '1' },
      }),
    )
    await press('Real use')
    await submit(' Two long operations ')
    await vi.waitFor(() => expect(root.textContent).toContain('that stretch is left out already'))
    expect(root.querySelector('input')?.value).toContain('Two long operations')
    expect(answered).not.toHaveBeenCalled()
    const [url, sent] = fetching.mock.calls[0]!
    expect(url).toBe('/api/v1/bins/7/exclusions')
    expect(JSON.parse(sent!.body as string)).toEqual({
      kind: 'real',
      from: question.from,
      to: question.to,
      reason: 'Two long operations',
    })
  })

  it('leads from a typing error to the count, and lets the stretch be left out', async () => {
    const ledger = vi.fn()
    open(true, { onLedger: ledger })
    await press('A typing error')
    await press('Show the count')
    expect(ledger).toHaveBeenCalledWith('op-9')
    await press('Leave it out')
    expect(root.querySelector('input')?.value).toBe('Typing error in a count')
  })
})

describe('startOfDay', () => {
  it('is local midnight, also where the clocks changed', () => {
    expect(startOfDay('2026-06-01', 'Europe/London')).toBe('2026-05-31T23:00:00.000Z')
    expect(startOfDay('2026-12-01', 'Europe/London')).toBe('2026-12-01T00:00:00.000Z')
  })
})
