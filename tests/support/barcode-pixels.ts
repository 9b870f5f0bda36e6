import bwipjs from 'bwip-js/node'

/** Dark and light modules of a symbol; a linear one is a single row, to be painted `bar` modules high. */
export interface Modules {
  width: number
  height: number
  dark: (x: number, y: number) => boolean
}

type Raw = { sbs: number[] } | { pixs: number[]; pixx: number; pixy: number }

/** The bare modules of a symbol from bwip-js, without text or quiet zone. */
export function modulesOf(symbology: string, text: string): Modules {
  const [raw] = bwipjs.raw({ bcid: symbology, text }) as unknown as [Raw]
  if ('pixs' in raw) {
    const { pixs, pixx, pixy } = raw
    return { width: pixx, height: pixy, dark: (x, y) => pixs[y * pixx + x] === 1 }
  }
  const row = raw.sbs.flatMap((width, i) => Array<boolean>(width).fill(i % 2 === 0))
  const bar = Math.ceil(row.length / 3)
  return { width: row.length, height: bar, dark: (x) => row[x] === true }
}

/** Paints a symbol in the middle of a light frame. Grey values, row by row. */
export function paint(
  modules: Modules,
  frame: { width: number; height: number; module: number; light?: number; dark?: number },
): { grey: Uint8ClampedArray; width: number; height: number } {
  const { width, height, module, light = 235, dark = 20 } = frame
  const grey = new Uint8ClampedArray(width * height).fill(light)
  const left = Math.floor((width - modules.width * module) / 2)
  const top = Math.floor((height - modules.height * module) / 2)
  if (left < 0 || top < 0) throw new RangeError('the symbol does not fit into the frame')
  for (let y = 0; y < modules.height * module; y += 1) {
    for (let x = 0; x < modules.width * module; x += 1) {
      if (modules.dark(Math.floor(x / module), Math.floor(y / module))) grey[(top + y) * width + left + x] = dark
    }
  }
  return { grey, width, height }
}
