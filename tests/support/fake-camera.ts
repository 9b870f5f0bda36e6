import { closeSync, openSync, writeSync } from 'node:fs'
import { modulesOf, paint } from './barcode-pixels.ts'

export interface FakeLabel {
  text: string
  /** As bwip-js names it: `qrcode`, `code128`, `datamatrix`, `gs1-128` … */
  symbology: string
}

const WIDTH = 1280
const HEIGHT = 720
const FRAMES_PER_SECOND = 10

/** The largest module that leaves the symbol inside the part of the frame that is looked at. */
const moduleFor = (width: number, height: number): number =>
  Math.max(1, Math.min(12, Math.floor((WIDTH * 0.6) / width), Math.floor((HEIGHT * 0.42) / height)))

/**
 * Writes a film for Chromium's fake camera (`--use-file-for-fake-video-capture`): each label in the middle of a light
 * frame for `seconds`, an empty second between two of them, over and over. Plain 4:2:0, so no converter is needed.
 */
export function writeFakeCamera(path: string, labels: readonly FakeLabel[], seconds = 3): void {
  const file = openSync(path, 'w')
  try {
    writeSync(file, `YUV4MPEG2 W${WIDTH} H${HEIGHT} F${FRAMES_PER_SECOND}:1 Ip A1:1 C420jpeg\n`)
    const colour = new Uint8Array((WIDTH * HEIGHT) / 2).fill(128)
    const show = (grey: Uint8ClampedArray, frames: number): void => {
      for (let i = 0; i < frames; i += 1) {
        writeSync(file, 'FRAME\n')
        writeSync(file, grey)
        writeSync(file, colour)
      }
    }
    const empty = new Uint8ClampedArray(WIDTH * HEIGHT).fill(235)
    for (const label of labels) {
      const modules = modulesOf(label.symbology, label.text)
      const module = moduleFor(modules.width, modules.height)
      show(paint(modules, { width: WIDTH, height: HEIGHT, module }).grey, Math.round(seconds * FRAMES_PER_SECOND))
      if (labels.length > 1) show(empty, FRAMES_PER_SECOND)
    }
  } finally {
    closeSync(file)
  }
}
