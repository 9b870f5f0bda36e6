import { BrowserMultiFormatReader } from '@zxing/browser'
import {
  BarcodeFormat,
  BinaryBitmap,
  DecodeHintType,
  HybridBinarizer,
  RGBLuminanceSource,
  type Result,
} from '@zxing/library'
import { repairCode128 } from './code128-repair.ts'

/**
 * One attempt a frame, each another way of looking. Success ends the ladder. Linear codes that lie across the frame are
 * only read when the picture itself is turned; the library's own turning shears its rows.
 */
export const rungs = [
  { turn: 0, scale: 1, hard: false },
  { turn: 0, scale: 1, hard: true },
  { turn: 90, scale: 1, hard: false },
  { turn: 20, scale: 1, hard: false },
  { turn: -20, scale: 1, hard: false },
  { turn: 45, scale: 1, hard: false },
  { turn: -45, scale: 1, hard: false },
  { turn: 0, scale: 0.5, hard: false },
] as const

/** A code as the engine gave it: `]C1` and separators kept for element strings. */
export interface Decoded {
  text: string
  /** Lower case, as `readScan` takes it: `qrcode`, `datamatrix`, `code128`, `ean13` … */
  format: string
}

/** No DataBar (it keeps pairs between frames and gives old codes), no PDF417. Each linear format costs time. */
const formats = [
  BarcodeFormat.QR_CODE,
  BarcodeFormat.DATA_MATRIX,
  BarcodeFormat.CODE_128,
  BarcodeFormat.EAN_13,
  BarcodeFormat.EAN_8,
  BarcodeFormat.UPC_A,
  BarcodeFormat.ITF,
  BarcodeFormat.CODE_39,
]

/**
 * The engine without its scan loop: that one would own the camera, look at whole frames on the page's own thread, and
 * never empty its readers between frames.
 */
class FrameReader extends BrowserMultiFormatReader {
  override decodeBitmap(bitmap: BinaryBitmap): Result {
    try {
      return this.reader.decodeWithState(bitmap)
    } finally {
      this.reader.reset()
    }
  }
}

function makeReader(hard: boolean): FrameReader {
  const hints = new Map<DecodeHintType, unknown>([
    [DecodeHintType.POSSIBLE_FORMATS, formats],
    // Without it the separators of a GS1-128 are dropped.
    [DecodeHintType.ASSUME_GS1, true],
  ])
  if (hard) hints.set(DecodeHintType.TRY_HARDER, true)
  return new FrameReader(hints)
}

/** Grey values of RGBA pixels, green counting most. */
export function luminance(pixels: Uint8ClampedArray): Uint8ClampedArray {
  const grey = new Uint8ClampedArray(pixels.length >> 2)
  for (let i = 0, j = 0; j < grey.length; i += 4, j += 1) {
    grey[j] = ((pixels[i] ?? 0) + 2 * (pixels[i + 1] ?? 0) + (pixels[i + 2] ?? 0)) >> 2
  }
  return grey
}

/** Makes a decoder; the engine is set up once and emptied after every attempt, so that nothing old comes back. */
export function makeDecoder(): (
  grey: Uint8ClampedArray,
  width: number,
  height: number,
  hard: boolean,
) => Decoded | null {
  repairCode128()
  const readers = { plain: makeReader(false), hard: makeReader(true) }
  return (grey, width, height, hard) => {
    const reader = hard ? readers.hard : readers.plain
    try {
      const bitmap = new BinaryBitmap(new HybridBinarizer(new RGBLuminanceSource(grey, width, height)))
      const result = reader.decodeBitmap(bitmap)
      const format = BarcodeFormat[result.getBarcodeFormat()].toLowerCase().replaceAll('_', '')
      return { text: result.getText(), format }
    } catch {
      return null
    }
  }
}
