import { drawInteger, seededRandom } from '#shared/kernel/random.ts'
import type { Random } from '#shared/kernel/random.ts'
import { computedReorderPoints } from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { publishedAims, publishedCalibration, publishedHistories } from '../shared/policy/published-calibration.ts'
import type { PublishedRow } from '../shared/policy/published-calibration.ts'
import { protectionDays, truthOf } from '../shared/policy/simulated-demand.ts'
import type { Truth } from '../shared/policy/simulated-demand.ts'
import { achievedInWard, inputFromLedger, simulateBin } from '../shared/policy/simulated-ledger.ts'
import type { WardTrouble } from '../shared/policy/simulated-ledger.ts'

/*
 * What a promise is worth: the achieved cycle service of our own code, first on the design of statistics, 4.8, held
 * against the figures published there, then from simulated ledgers to the number. Run: `npm run bench:calibration`.
 * `BENCH_MEANS=2,10,50` asks for other means over the protection interval than 10, `BENCH_HISTORIES` for their number.
 */
const means = (process.env.BENCH_MEANS ?? '10').split(',').map(Number)
const histories = Number(process.env.BENCH_HISTORIES ?? publishedHistories)

type Method = keyof PublishedRow['achieved']
const methods: Record<Method, { name: string; options: (truth: Truth) => Partial<PolicyInput>; held: boolean }> = {
  own: { name: 'mixture (4, 2)', options: () => ({}), held: true },
  pooled: { name: 'mixture pooled', options: ({ ratio }) => ({ prior: { nu0: 8, w0: ratio } }), held: true },
  student: { name: 'predictive t', options: () => ({ method: 'normal' }), held: true },
  gammaPoisson: { name: 'gamma-Poisson', options: () => ({ method: 'poisson' }), held: true },
  plugInNormal: {
    name: 'plug-in normal',
    options: () => ({ method: 'normal', estimate: 'plug-in' }),
    held: false,
  },
}
const names = Object.keys(methods) as Method[]

/** Counts 3, 4 or 7 days apart, as often as .4, .4, .2. */
const drawDays = (random: Random, count: number): number[] =>
  Array.from({ length: count }, () => [3, 3, 4, 4, 7][drawInteger(random, 0, 4)]!)

interface Cell {
  /** Share of cycles that last, in percent */
  achieved: number
  /** Standard error of one history, in percent */
  spread: number
  level: number
}

function summary(truth: Truth, levels: readonly number[]): Cell {
  const service = levels.map((level) => 100 * truth.cdf(level))
  const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length
  const achieved = mean(service)
  const spread = Math.sqrt(mean(service.map((value) => (value - achieved) ** 2)))
  return { achieved, spread, level: mean(levels) }
}

/** Every method on the same histories of one row. Shape: by method, then aim. */
function calibrate(row: PublishedRow): Record<Method, Cell[]> {
  const truth = truthOf(row.truth, row.mean)
  const random = seededRandom(`calibration ${row.truth} ${row.mean} ${row.counts}`)
  const seen = Array.from({ length: histories }, () => {
    const days = drawDays(random, row.counts)
    return truth.draw(random, days).map((quantity, i) => ({ days: days[i]!, quantity }))
  })
  const cellsOf = (method: Method): Cell[] =>
    publishedAims.map((serviceLevel) => {
      const options = methods[method].options(truth)
      const inputs = seen.map((intervals) => ({
        ...{ intervals, leadTime: { meanDays: protectionDays }, serviceLevel },
        ...options,
      }))
      const levels =
        options.method === undefined
          ? computedReorderPoints(inputs)
          : inputs.map((input) => reorderPoint(input).computedReorderPoint)
      return summary(
        truth,
        levels.map((level) => level!),
      )
    })
  return Object.fromEntries(names.map((method) => [method, cellsOf(method)])) as Record<Method, Cell[]>
}

/**
 * Whether a figure lies within three standard errors of the published one, theirs and ours combined; theirs is that of
 * our spread over their number of histories. Half of the last printed digit is allowed for.
 */
function agrees(cell: Cell, published: number): boolean {
  const error = cell.spread * Math.sqrt(1 / histories + 1 / publishedHistories)
  return Math.abs(cell.achieved - published) <= 3 * error + 0.05
}

function partOne(): boolean {
  let compared = 0
  const apart: string[] = []
  for (const mean of means) {
    say(`\nAchieved cycle service, aims ${publishedAims.map((p) => 100 * p).join('/')} %, mean ${mean} over 5 days,`)
    say(`${histories} histories a row; in brackets the mean reorder point at 99 %; * beyond three standard errors`)
    say(['truth', 'n', ...names.map((method) => methods[method].name)].map((head, i) => pad(head, i)).join(''))
    for (const row of publishedCalibration.filter((each) => each.mean === mean)) {
      const cells = calibrate(row)
      const columns = names.map((method) => {
        const marked = cells[method].map((cell, i) => {
          const published = row.achieved[method][i]!
          const isHeld = methods[method].held
          if (isHeld) compared++
          const isApart = isHeld && !agrees(cell, published)
          if (isApart)
            apart.push(
              `${row.truth} n ${row.counts} mean ${mean} ${methods[method].name}: ${cell.achieved.toFixed(2)} for ${published}`,
            )
          return cell.achieved.toFixed(1) + (isApart ? '*' : '')
        })
        return `${marked.join('/')} (${cells[method][2]!.level.toFixed(1)})`
      })
      say([row.truth, String(row.counts), ...columns].map((text, i) => pad(text, i)).join(''))
    }
  }
  say(
    `\n${compared} figures held against statistics, 4.8 (calibration.R, R 4.2.2, seed 20240601): ${apart.length} apart`,
  )
  for (const line of apart) say(`  ${line}`)
  return apart.length === 0
}

const troubles: [string, WardTrouble][] = [
  ['counts and deliveries as they should be', {}],
  ['a third of counts entered late', { enteredLate: 0.33 }],
  ['30 % of deliveries unkeyed, asked and answered', { unkeyed: 0.3, answered: true }],
  ['30 % of deliveries unkeyed, the question unanswered', { unkeyed: 0.3 }],
  ['30 % of deliveries of one pack unkeyed: no question', { unkeyed: 0.3, packs: 1 }],
  ['orders at 8 so far: sometimes found empty', { orderAt: 8 }],
  ['orders at 0 so far: often found empty', { orderAt: 0 }],
  ['every fifth count missed', { missed: 0.2 }],
  ['all of it at once', { enteredLate: 0.33, unkeyed: 0.3, answered: true, orderAt: 8, missed: 0.2 }],
]

const ledgerAims = [0.95, 0.98, 0.99]
const wardBins = 200

/** From simulated ledgers, through fold, intervals, calendar and policy, to what the number is worth. */
function partTwo(): void {
  say(
    `\nFrom ledger to number: ${wardBins} bins a row, half a year of counts every 4 days, 2 a day, ratio 2, delivery in 2 days`,
  )
  say(`${'ward'.padEnd(54)}${ledgerAims.map((p) => `${100 * p} %`.padStart(9)).join('')}   mean reorder points   empty`)
  for (const [name, trouble] of troubles) {
    const random = seededRandom(`ledger ${name}`)
    const bins = Array.from({ length: wardBins }, () => simulateBin(random, trouble))
    const inputs = bins.map(inputFromLedger)
    const rows = ledgerAims.map((serviceLevel) => {
      const got = bins.flatMap((bin, i) => {
        const level = inputs[i] ? reorderPoint({ ...inputs[i], serviceLevel }).reorderPoint : null
        return level === null ? [] : [{ level, achieved: achievedInWard(bin, level) }]
      })
      const mean = (of: (one: (typeof got)[number]) => number) => got.reduce((s, one) => s + of(one), 0) / got.length
      return { achieved: mean(({ achieved }) => achieved), level: mean(({ level }) => level) }
    })
    const counts = bins.flatMap(({ rows: ledger }) => ledger.filter(({ type }) => type === 'count'))
    const empty = counts.filter(({ quantity }) => quantity === 0).length / counts.length
    say(
      name.padEnd(54) +
        rows.map(({ achieved }) => (100 * achieved).toFixed(1).padStart(9)).join('') +
        rows.map(({ level }) => level.toFixed(1).padStart(8)).join('') +
        `${(100 * empty).toFixed(0)} %`.padStart(8),
    )
  }
}

const pad = (text: string, column: number): string => text.padEnd(column === 0 ? 9 : column === 1 ? 4 : 32)

function say(line: string): void {
  process.stdout.write(`${line}\n`)
}

const isCalibrated = partOne()
partTwo()
if (!isCalibrated) process.exitCode = 1
