import type { PolicyInput } from '#shared/policy/policy-input.ts'

/** How often each number of units is used up in a stretch, out of 200 like it. */
export interface DemandPicture {
  /** Units in the columns' order; `dots` add up to 200. */
  columns: { units: number; upTo: number; dots: number }[]
  /** Stretches of the 200 that need more than the reorder point. */
  beyond: number
  /** Units per column. */
  step: number
}

export const STRETCHES = 200
const MOST_COLUMNS = 40

/**
 * Spreads 200 dots over the units used: dot i stands at the quantile (i + 0.5) / 200 of a distribution.
 *
 * @param cdf P(use <= units); `point` the reorder point the picture is drawn for
 */
export function pictureOf(cdf: (units: number) => number, point: number, highest = 5000): DemandPicture {
  const counts: number[] = []
  let done = 0
  for (let units = 0; done < STRETCHES && units <= highest; units += 1) {
    // Dot i belongs here when its quantile lies at or below F(units).
    const reached = Math.min(STRETCHES, Math.max(done, Math.floor(cdf(units) * STRETCHES + 0.5)))
    counts.push(reached - done)
    done = reached
  }
  if (done < STRETCHES) counts.push(STRETCHES - done)
  const beyond = counts.slice(point + 1).reduce((sum, n) => sum + n, 0)
  const firstUsed = Math.max(
    0,
    counts.findIndex((n) => n > 0),
  )
  const step = Math.max(1, Math.ceil((counts.length - firstUsed) / MOST_COLUMNS))
  return { columns: columnsOf(counts, point, step), beyond, step }
}

/** Groups units into columns so that none of them straddles the line: a column ends at the reorder point. */
function columnsOf(counts: readonly number[], point: number, step: number): DemandPicture['columns'] {
  const columns = new Map<number, { units: number; upTo: number; dots: number }>()
  counts.forEach((dots, units) => {
    if (dots === 0) return
    const index = Math.floor((units - point - 1) / step)
    const start = point + 1 + index * step
    const column = columns.get(index) ?? { units: Math.max(0, start), upTo: start + step - 1, dots: 0 }
    column.dots += dots
    columns.set(index, column)
  })
  return [...columns.values()].sort((a, b) => a.units - b.units)
}

/** The picture of one policy, by its own fitted method. The statistics are loaded only when somebody asks why. */
export async function demandPicture(input: unknown, point: number): Promise<DemandPicture | null> {
  const { protectionCdf } = await import('./protection-cdf.ts')
  const cdf = protectionCdf(input as PolicyInput)
  return cdf ? pictureOf(cdf, point) : null
}
