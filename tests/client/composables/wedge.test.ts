import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { makeWedge, type WedgeEvent } from '#src/composables/wedge.ts'

let now = 0
const scans: string[] = []
const typed: string[] = []
let wedge: ReturnType<typeof makeWedge>

const key = (
  name: string,
  more: Partial<WedgeEvent> = {},
): WedgeEvent & { preventDefault: ReturnType<typeof vi.fn<() => void>> } => ({
  key: name,
  code: '',
  ctrlKey: false,
  altKey: false,
  metaKey: false,
  timeStamp: now,
  stopPropagation: () => undefined,
  ...more,
  preventDefault: vi.fn<() => void>(),
})

/** Presses keys one after another with a gap in milliseconds; names longer than one character stand alone. */
function press(names: string[], gap: number): void {
  for (const name of names) {
    vi.advanceTimersByTime(gap)
    now += gap
    wedge.handle(key(name), false)
  }
}
const silence = (ms = 200): void => {
  vi.advanceTimersByTime(ms)
  now += ms
}

beforeEach(() => {
  vi.useFakeTimers()
  now = 1_000
  scans.length = 0
  typed.length = 0
  wedge = makeWedge(
    (text) => scans.push(text),
    (name) => {
      typed.push(name)
      return true
    },
  )
})
afterEach(() => {
  wedge.dispose()
  vi.useRealTimers()
})

describe('wedge', () => {
  it('gives a scan at Enter, at Tab or after silence, and none of its keys as typed', () => {
    press([...'U7K2M4Q9', 'Enter'], 8)
    press([...'U7K2M4Q9', 'Tab'], 8)
    press([...'U7K2M4Q9'], 8)
    silence()
    expect(scans).toEqual(['U7K2M4Q9', 'U7K2M4Q9', 'U7K2M4Q9'])
    expect(typed).toEqual([])
  })

  it('passes over the Shift keys between the letters of a scan', () => {
    press(
      [...'U7K2M4Q9'].flatMap((letter) => (/[A-Z]/.test(letter) ? ['Shift', letter] : [letter])),
      4,
    )
    press(['Enter'], 4)
    expect(scans).toEqual(['U7K2M4Q9'])
    expect(typed).toEqual([])
  })

  it('takes the middle of the gaps, for radio bursts jitter', () => {
    press([...'U7K2'], 5)
    press(['M'], 80)
    press([...'4Q9', 'Enter'], 5)
    expect(scans).toEqual(['U7K2M4Q9'])
  })

  it('leaves a person’s digits to the page, each within a tenth of a second', () => {
    press(['1'], 300)
    silence(60)
    expect(typed).toEqual(['1'])
    press(['2', 'Enter'], 250)
    expect(typed).toEqual(['1', '2', 'Enter'])
    expect(scans).toEqual([])
  })

  it('gives back digits that came quickly but were too few for a scan', () => {
    press(['1', '2', '0', 'Enter'], 6)
    expect(typed).toEqual(['1', '2', '0', 'Enter'])
    expect(scans).toEqual([])
  })

  it('does not take slow typing of a whole code for a scan', () => {
    press([...'U7K2M4Q9', 'Enter'], 160)
    expect(scans).toEqual([])
    expect(typed).toEqual([...'U7K2M4Q9', 'Enter'])
  })

  it.each<[string, Partial<WedgeEvent>[]]>([
    ['Ctrl+] by key', [{ key: ']', ctrlKey: true }]],
    ['Ctrl+] by place, on another layout', [{ key: '+', code: 'BracketRight', ctrlKey: true }]],
    ['Alt+029', ['0', '2', '9'].map((digit) => ({ key: digit, altKey: true }))],
  ])('reads %s as the separator', (_name, events) => {
    press([...'010952012345678810AB'], 5)
    for (const event of events) {
      now += 5
      const sent = key('', event)
      wedge.handle(sent, false)
      expect(sent.preventDefault).toHaveBeenCalled()
    }
    press([...'17271231', 'Enter'], 5)
    expect(scans).toEqual(['010952012345678810AB\u001d17271231'])
  })

  it('keeps Enter for a focused button', () => {
    silence()
    wedge.handle(key('Enter'), true)
    expect(typed).toEqual([])
  })

  it('gives other keys at once, after the digits before them', () => {
    press(['1', '2'], 20)
    wedge.handle(key('Backspace'), false)
    expect(typed).toEqual(['1', '2', 'Backspace'])
  })
})
