import { describe, expect, it } from 'vitest'
import { makeSteady, pause, viewfinder } from '#src/composables/scan-frames.ts'

describe('viewfinder', () => {
  it('is the middle of what the window shows of the picture', () => {
    expect(viewfinder({ width: 1280, height: 720 }, { width: 390, height: 148 })).toEqual({
      x: 128,
      y: 144,
      width: 1024,
      height: 432,
    })
    expect(viewfinder({ width: 1080, height: 1920 }, { width: 390, height: 148 })).toMatchObject({
      width: 864,
      height: 410,
    })
  })
})

describe('steady reads', () => {
  const qr = { text: 'U7K2M4Q9', format: 'qrcode' }
  const ean = { text: '4012345678901', format: 'ean13' }

  it('gives a strong code at once and only once while it stays in view', () => {
    const steady = makeSteady()
    expect(steady(qr, 0)).toEqual(qr)
    expect(steady(qr, 100)).toBeNull()
    expect(steady(null, 200)).toBeNull()
    expect(steady(qr, 300)).toBeNull()
  })

  it('gives it again after three empty frames', () => {
    const steady = makeSteady()
    steady(qr, 0)
    for (const t of [100, 200, 300]) steady(null, t)
    expect(steady(qr, 400)).toEqual(qr)
  })

  it('wants two equal reads of a code with a weak check', () => {
    const steady = makeSteady()
    expect(steady(ean, 0)).toBeNull()
    expect(steady({ ...ean, text: '4012345678918' }, 100)).toBeNull()
    expect(steady(ean, 200)).toBeNull()
    expect(steady(ean, 300)).toEqual(ean)
  })
})

it('looks ten times a second, four times when an attempt takes long', () => {
  expect([pause(20), pause(100), pause(400)]).toEqual([80, 150, 0])
})
