import { luminance, makeDecoder, rungs, type Decoded } from './decoder.ts'

export interface DecodeRequest {
  id: number
  frame: ImageBitmap
  rung: number
}
export interface DecodeReply {
  id: number
  found: Decoded | null
  /** Milliseconds the attempt took. */
  took: number
}

// Misses are thrown as exceptions; without their traces they cost half.
Object.assign(Error, { stackTraceLimit: 0 })
const decode = makeDecoder()
let canvas: OffscreenCanvas | null = null

/** The frame as grey values, turned and scaled as the rung asks. */
function look(frame: ImageBitmap, index: number): Decoded | null {
  const rung = rungs[index % rungs.length] ?? rungs[0]
  const across = rung.turn === 90
  const width = Math.max(1, Math.round((across ? frame.height : frame.width) * rung.scale))
  const height = Math.max(1, Math.round((across ? frame.width : frame.height) * rung.scale))
  canvas ??= new OffscreenCanvas(width, height)
  canvas.width = width
  canvas.height = height
  const context = canvas.getContext('2d', { willReadFrequently: true })
  if (!context) return null
  context.translate(width / 2, height / 2)
  context.rotate((rung.turn * Math.PI) / 180)
  context.scale(rung.scale, rung.scale)
  context.drawImage(frame, -frame.width / 2, -frame.height / 2)
  const { data } = context.getImageData(0, 0, width, height)
  return decode(luminance(data), width, height, rung.hard)
}

self.addEventListener('message', (event: MessageEvent<DecodeRequest>) => {
  const { id, frame, rung } = event.data
  const startedAt = performance.now()
  let found: Decoded | null = null
  try {
    found = look(frame, rung)
  } finally {
    frame.close()
    const reply: DecodeReply = { id, found, took: performance.now() - startedAt }
    self.postMessage(reply)
  }
})
