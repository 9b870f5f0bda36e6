import type { PolicyInput } from '#shared/policy/policy-input.ts'

/** Units used up in a stretch, as columns of dots: each dot is one stretch out of so many like it. */
export interface DemandPicture {
  /** Units in the columns' order; `dots` add up to `stretches`. `enough`: share of stretches that need `upTo` at most. */
  columns: { units: number; upTo: number; dots: number; enough: number }[]
  stretches: number
  /** Stretches among them that need more than the reorder point. */
  beyond: number
  /** Units per column. */
  step: number
}

/** What the law of use until the next arrival says, for the picture and the words beside it. Units of use. */
export interface StretchFigures {
  picture: DemandPicture
  /** P(use > the point the picture is drawn for). */
  risk: number
  /** The smallest level that meets the aim, what it reaches, and what one unit less would reach. */
  level: number
  reached: number
  short: number | null
  /** Use below which a tenth, a quarter, a half, three quarters and nine tenths of the stretches stay. */
  tenth: number
  quarter: number
  half: number
  threeQuarters: number
  nineTenths: number
}

type Cdf = (units: number) => number

const FEW = 200
const MANY = 1000
const MOST_COLUMNS = 40
const HIGHEST = 5000

/** So many dots that the risk is seen: 200, or 1,000 where it is less than one in 400 and 200 would show none. */
export const stretchesFor = (risk: number): number => (Math.round(risk * FEW) >= 1 ? FEW : MANY)

/**
 * Spreads dots over the units used: dot i stands at the quantile (i + 0.5) / stretches of a distribution.
 *
 * @param cdf P(use <= units); `point` the reorder point the picture is drawn for
 */
export function pictureOf(cdf: Cdf, point: number, stretches = FEW): DemandPicture {
  const counts: number[] = []
  let done = 0
  for (let units = 0; done < stretches && units <= HIGHEST; units += 1) {
    // Dot i belongs here when its quantile lies at or below F(units).
    const reached = Math.min(stretches, Math.max(done, Math.floor(cdf(units) * stretches + 0.5)))
    counts.push(reached - done)
    done = reached
  }
  if (done < stretches) counts.push(stretches - done)
  const beyond = counts.slice(point + 1).reduce((sum, n) => sum + n, 0)
  const firstUsed = Math.max(
    0,
    counts.findIndex((n) => n > 0),
  )
  const step = Math.max(1, Math.ceil((counts.length - firstUsed) / MOST_COLUMNS))
  const columns = columnsOf(counts, point, step).map((column) => ({ ...column, enough: cdf(column.upTo) }))
  return { columns, stretches, beyond, step }
}

/** Groups units into columns so that none of them straddles the line: a column ends at the reorder point. */
function columnsOf(counts: readonly number[], point: number, step: number) {
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

/** The smallest number of units that so large a share of the stretches stays at or below. */
function quantileOf(cdf: Cdf, share: number): number {
  let units = 0
  while (cdf(units) < share && units < HIGHEST) units += 1
  return units
}

/** Each value is asked for several times, and the law of few counts is a long sum. */
function remembered(cdf: Cdf): Cdf {
  const known = new Map<number, number>()
  return (units) => {
    const value = known.get(units) ?? cdf(units)
    known.set(units, value)
    return value
  }
}

/** All figures of one law of use. `level`: the worked-out reorder point. */
export function figuresOf(law: Cdf, point: number, level: number): StretchFigures {
  const cdf = remembered(law)
  const risk = Math.max(0, 1 - cdf(point))
  return {
    picture: pictureOf(cdf, point, stretchesFor(risk)),
    risk,
    level,
    reached: cdf(level),
    short: level > 0 ? cdf(level - 1) : null,
    tenth: quantileOf(cdf, 0.1),
    quarter: quantileOf(cdf, 0.25),
    half: quantileOf(cdf, 0.5),
    threeQuarters: quantileOf(cdf, 0.75),
    nineTenths: quantileOf(cdf, 0.9),
  }
}

/** The figures of one policy, by its own fitted method. The statistics are loaded only when somebody asks why. */
export async function stretchFigures(input: PolicyInput, point: number, level: number): Promise<StretchFigures | null> {
  const { protectionCdf } = await import('#shared/policy/protection-cdf.ts')
  const cdf = protectionCdf(input)
  return cdf ? figuresOf(cdf, point, level) : null
}
