import { describe, expect, it } from 'vitest'
import { learn, stamp, unknownClock } from '#src/services/time.ts'

const at = (ms: number): string => new Date(ms).toISOString()
const T = Date.UTC(2026, 11, 1, 9)

describe('estimated time', () => {
  it('adds the offset learnt from the middle of the round trip', () => {
    const clock = learn(T + 5_000, T, T + 400)
    expect(clock).toMatchObject({ offsetMs: 4_800, errMs: 200, lastContact: T + 5_000, floor: null })
    expect(stamp(clock, T + 1_000).stamp).toMatchObject({ estTime: at(T + 5_800), clockOffsetMs: 4_800 })
  })

  it('is the device time alone before any contact', () => {
    expect(stamp(unknownClock, T).stamp).toEqual({
      deviceTime: at(T),
      estTime: at(T),
      lastContact: null,
      clockOffsetMs: null,
      offsetErrMs: null,
    })
  })

  it('never goes back between two contacts, and starts anew at the next one', () => {
    const ahead = stamp(learn(T, T, T), T + 86_400_000)
    const back = stamp(ahead.clock, T + 1_000)
    expect(back.stamp.estTime).toBe(at(T + 86_400_000))
    expect(stamp(learn(T + 2_000, T + 2_000, T + 2_000), T + 3_000).stamp.estTime).toBe(at(T + 3_000))
  })

  it('gives up the offset when the clock was set back, and never goes before the last contact', () => {
    const set = stamp(learn(T + 60_000, T, T), T - 3_600_000)
    expect(set.stamp).toMatchObject({ estTime: at(T + 60_000), clockOffsetMs: null, offsetErrMs: null })
  })
})
