import { describe, expect, it } from 'vitest'
import { makeBounce } from '#src/components/counts/key-bounce.ts'

describe('key bounce', () => {
  it('drops a second identical tap within 80 ms and nothing else', () => {
    const isBounce = makeBounce()
    expect(isBounce('1', 1_000)).toBe(false)
    expect(isBounce('1', 1_079)).toBe(true)
    expect(isBounce('1', 1_080)).toBe(false)
    expect(isBounce('2', 1_090)).toBe(false)
    expect(isBounce('1', 1_100)).toBe(false)
  })
})
