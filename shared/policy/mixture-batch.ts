import { countedWastage } from './fitted.ts'
import type { CensoredCounts } from './censored-counts.ts'
import { columnMoments } from './demand-moments.ts'
import type { DemandMoments } from './demand-moments.ts'
import { LARGE_MEAN } from './fit-method.ts'
import { mixtureCounts } from './fit-mixture.ts'
import { emptyNodes, mixtureNodes, mixturePosterior, ratioAt } from './mixture-nodes.ts'
import { emptyRun, mixtureLevel } from './mixture-run.ts'
import type { PolicyInput } from './policy-input.ts'
import { reorderPoint } from './reorder-point.ts'
import { resolveInput } from './resolve-input.ts'
import type { ResolvedInput, ResolvedInterval } from './resolve-input.ts'

/**
 * Many bins for the default method as columns, to be computed in one go or moved to another thread.
 *
 * The intervals of bin i are the rows `offsets[i]` to before `offsets[i + 1]` of the first four columns; every other
 * column has one entry a bin. Units: days and units of use, as in a policy input with its defaults filled in.
 */
export interface MixtureBatch {
  offsets: Int32Array
  exposureDays: Float64Array
  quantity: Float64Array
  weight: Float64Array
  /** 1 where the interval ended empty */
  censored: Uint8Array
  protectionDays: Float64Array
  /** Days of exposure to cover, and their variance from the spread of the lead time */
  protectionExposure: Float64Array
  protectionVariance: Float64Array
  serviceLevel: Float64Array
  nu0: Float64Array
  w0: Float64Array
  /** Rate of like wards; NaN without one */
  rateA: Float64Array
  rateB: Float64Array
  wastagePerDay: Float64Array
  /** 1 where a protection mean above 1,000 units is answered by the t law */
  auto: Uint8Array
}

/** Answered for a bin the batch does not cover after all; `reorderPoint` has to be asked. */
export const NOT_COVERED = -1

const LARGEST_LEVEL = 2 ** 31 - 1

/** What `packBatch` could take and what not, as positions in the list it was given. */
export interface PackedBatch {
  batch: MixtureBatch
  covered: Int32Array
  rest: number[]
}

/**
 * Sorts policy inputs into those the batch covers, as columns, and the rest.
 *
 * Covered: method auto or negative-binomial, predictive, cycle service, no lead times seen, and intervals of which one
 * did not end empty (or a rate of like wards, also without any interval). The rest is for `reorderPoint`: the t law,
 * other methods, known demand, `entered`, lead times seen.
 *
 * @throws {PolicyInputError} for the first input that cannot be read
 */
export function packBatch(inputs: readonly PolicyInput[]): PackedBatch {
  const rows = inputs.reduce((sum, { intervals }) => sum + (intervals?.length ?? 0), 0)
  const batch = emptyBatch(inputs.length, rows)
  const covered: number[] = []
  const rest: number[] = []
  inputs.forEach((input, i) => {
    const resolved = resolveInput(input)
    if (!isCovered(resolved)) rest.push(i)
    else {
      addBin(batch, covered.length, resolved)
      covered.push(i)
    }
  })
  return { batch: trimmed(batch, covered.length), covered: Int32Array.from(covered), rest }
}

function isCovered(input: ResolvedInput): boolean {
  const { intervals, prior } = input
  if (intervals === null || input.estimate !== 'predictive' || input.serviceMeasure !== 'cycle') return false
  if (input.method !== 'auto' && input.method !== 'negative-binomial') return false
  if (input.leadTime.observedDays.length > 0 || input.protectionExposureDays <= 0) return false
  if (intervals.length === 0) return prior.rate !== null && prior.rate.b > 0
  let whole = 0
  let fractions = false
  for (const interval of intervals) {
    if (!Number.isInteger(interval.quantity)) fractions = true
    if (!interval.censored) whole++
  }
  // Fractions of a unit are answered by the t law, which needs two intervals.
  if (fractions && input.method === 'auto' && whole >= 2) return false
  return whole > 0 || prior.rate !== null
}

function addBin(batch: MixtureBatch, i: number, input: ResolvedInput): void {
  const spread = input.leadTime.sdDays * input.exposureRatio
  batch.protectionDays[i] = input.protectionDays
  batch.protectionExposure[i] = input.protectionExposureDays
  batch.protectionVariance[i] = spread * spread
  batch.serviceLevel[i] = input.serviceLevel
  batch.nu0[i] = input.prior.nu0
  batch.w0[i] = input.prior.w0
  batch.rateA[i] = input.prior.rate?.a ?? Number.NaN
  batch.rateB[i] = input.prior.rate?.b ?? Number.NaN
  batch.wastagePerDay[i] = input.wastagePerDay
  batch.auto[i] = input.method === 'auto' ? 1 : 0
  let at = batch.offsets[i]!
  for (const interval of input.intervals!) {
    batch.exposureDays[at] = interval.exposureDays
    batch.quantity[at] = interval.quantity
    batch.weight[at] = interval.weight
    batch.censored[at] = interval.censored ? 1 : 0
    at++
  }
  batch.offsets[i + 1] = at
}

/** Without the room left for bins and intervals that were not taken. */
function trimmed(batch: MixtureBatch, bins: number): MixtureBatch {
  const rows = batch.offsets[bins]!
  if (bins === batch.serviceLevel.length && rows === batch.quantity.length) return batch
  return {
    offsets: batch.offsets.slice(0, bins + 1),
    exposureDays: batch.exposureDays.slice(0, rows),
    quantity: batch.quantity.slice(0, rows),
    weight: batch.weight.slice(0, rows),
    censored: batch.censored.slice(0, rows),
    protectionDays: batch.protectionDays.slice(0, bins),
    protectionExposure: batch.protectionExposure.slice(0, bins),
    protectionVariance: batch.protectionVariance.slice(0, bins),
    serviceLevel: batch.serviceLevel.slice(0, bins),
    nu0: batch.nu0.slice(0, bins),
    w0: batch.w0.slice(0, bins),
    rateA: batch.rateA.slice(0, bins),
    rateB: batch.rateB.slice(0, bins),
    wastagePerDay: batch.wastagePerDay.slice(0, bins),
    auto: batch.auto.slice(0, bins),
  }
}

function emptyBatch(bins: number, rows: number): MixtureBatch {
  return {
    offsets: new Int32Array(bins + 1),
    exposureDays: new Float64Array(rows),
    quantity: new Float64Array(rows),
    weight: new Float64Array(rows),
    censored: new Uint8Array(rows),
    protectionDays: new Float64Array(bins),
    protectionExposure: new Float64Array(bins),
    protectionVariance: new Float64Array(bins),
    serviceLevel: new Float64Array(bins),
    nu0: new Float64Array(bins),
    w0: new Float64Array(bins),
    rateA: new Float64Array(bins),
    rateB: new Float64Array(bins),
    wastagePerDay: new Float64Array(bins),
    auto: new Uint8Array(bins),
  }
}

/** The memory of a batch, to be handed over to another thread instead of copied. */
export const batchBuffers = (batch: MixtureBatch): ArrayBuffer[] =>
  Object.values(batch).map((column: Int32Array | Float64Array | Uint8Array) => column.buffer as ArrayBuffer)

/**
 * The computed reorder points of a batch: for each bin exactly `reorderPoint(input).computedReorderPoint`, by the same
 * code and the same order of operations, without the rest of a policy.
 *
 * @returns one entry a bin; `NOT_COVERED` where the t law answers (protection mean above 1,000, method auto), or the
 * level does not fit or is never reached
 */
export function mixtureLevels(batch: MixtureBatch): Int32Array {
  const points = new Int32Array(batch.serviceLevel.length)
  const nodes = emptyNodes()
  const run = emptyRun()
  for (let i = 0; i < points.length; i++) points[i] = levelOf(batch, i, nodes, run)
  return points
}

function levelOf(
  batch: MixtureBatch,
  i: number,
  nodes: ReturnType<typeof emptyNodes>,
  run: ReturnType<typeof emptyRun>,
): number {
  const from = batch.offsets[i]!
  const to = batch.offsets[i + 1]!
  const exposure = batch.protectionExposure[i]!
  const prior = priorOf(batch, i)
  const counts = to > from ? countsOf(batch, from, to, prior) : null
  if (counts && wantsStudent(batch, i, counts.plain, counts.whole)) return NOT_COVERED
  const posterior = mixturePosterior(counts?.counts ?? null, prior)
  const seenPerDay = counts ? posterior.used / posterior.days : prior.rate!.a / prior.rate!.b
  const wasted = countedWastage(batch.wastagePerDay[i]!, seenPerDay) * batch.protectionDays[i]!
  const stretch = { exposure, variance: batch.protectionVariance[i]!, wasted }
  mixtureNodes(posterior, stretch, nodes)
  const variance = nodes.mean * ratioAt(posterior, posterior.dispersion, stretch)
  try {
    const level = mixtureLevel(nodes, batch.serviceLevel[i]!, variance, run)
    return level <= LARGEST_LEVEL ? level : NOT_COVERED
  } catch (error) {
    if (error instanceof RangeError) return NOT_COVERED
    throw error
  }
}

const priorOf = (batch: MixtureBatch, i: number): ResolvedInput['prior'] => ({
  nu0: batch.nu0[i]!,
  w0: batch.w0[i]!,
  rate: Number.isNaN(batch.rateA[i]!) ? null : { a: batch.rateA[i]!, b: batch.rateB[i]! },
})

interface BatchCounts {
  counts: CensoredCounts
  plain: DemandMoments
  /** Intervals that did not end empty */
  whole: number
}

function countsOf(batch: MixtureBatch, from: number, to: number, prior: ResolvedInput['prior']): BatchCounts {
  const plain = columnMoments(batch, from, to)
  let whole = 0
  for (let row = from; row < to; row++) if (batch.censored[row] === 0) whole++
  if (whole === to - from)
    return { counts: { moments: plain, freedom: Math.max(0, plain.intervals - 1) }, plain, whole }
  return { counts: mixtureCounts(intervalsOf(batch, from, to), prior, plain), plain, whole }
}

/** Filling in empty endings reads intervals; few bins have any. */
function intervalsOf(batch: MixtureBatch, from: number, to: number): ResolvedInterval[] {
  return Array.from({ length: to - from }, (_, k) => ({
    days: batch.exposureDays[from + k]!,
    exposureDays: batch.exposureDays[from + k]!,
    quantity: batch.quantity[from + k]!,
    censored: batch.censored[from + k] === 1,
    weight: batch.weight[from + k]!,
  }))
}

const wantsStudent = (batch: MixtureBatch, i: number, plain: DemandMoments, whole: number): boolean =>
  batch.auto[i] === 1 && whole >= 2 && plain.meanPerDay * batch.protectionExposure[i]! > LARGE_MEAN

/**
 * The computed reorder point of every input: the batch for what it covers, `reorderPoint` for the rest.
 *
 * @returns one entry an input; null where the entered level holds
 * @throws {PolicyInputError} for the first input that cannot be read
 */
export function computedReorderPoints(inputs: readonly PolicyInput[]): (number | null)[] {
  const { batch, covered, rest } = packBatch(inputs)
  const points: (number | null)[] = inputs.map(() => null)
  const levels = mixtureLevels(batch)
  levels.forEach((level, k) => {
    if (level === NOT_COVERED) rest.push(covered[k]!)
    else points[covered[k]!] = level
  })
  for (const i of rest) points[i] = reorderPoint(inputs[i]!).computedReorderPoint
  return points
}
