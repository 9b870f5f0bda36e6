import nbCdf from '@stdlib/stats-base-dists-negative-binomial-cdf'
import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { drawInteger, seededRandom } from '#shared/kernel/random.ts'

/** Histories as a ward has them: 6 to 80 intervals of 1 to 7 days, means of 1 to 300 over the protection interval. */
const random = seededRandom('bench')
const histories: PolicyInput[] = Array.from({ length: 300 }, () => {
  const rate = 0.2 * 1.03 ** drawInteger(random, 0, 150)
  const intervals = Array.from({ length: drawInteger(random, 6, 80) }, () => {
    const days = drawInteger(random, 1, 7)
    return { days, quantity: Math.max(0, Math.round(rate * days * (0.4 + 1.2 * random()))) }
  })
  return { intervals, leadTime: { meanDays: 2.2 }, reviewPeriodDays: 1.4, serviceLevel: 0.995 }
})

/** The formula written down plainly with a general library: nothing cached, each node's distribution asked anew. */
function plain(input: PolicyInput): number {
  const rows = input.intervals!
  const n = rows.length
  const T = rows.reduce((s, r) => s + r.days, 0)
  const X = rows.reduce((s, r) => s + r.quantity, 0)
  const P = input.leadTime.meanDays + input.reviewPeriodDays!
  const mu = X / T
  const s2 = (rows.reduce((s, r) => s + r.quantity ** 2 / r.days, 0) - X ** 2 / T) / (n - 1)
  const w = X === 0 ? 1 : s2 / mu
  const nu = 4 + n - 1
  const mean = (P * (X + 0.5)) / T
  const ratios = Array.from({ length: 200 }, (_, k) => {
    const node = Math.max(1, (4 * 2 + (n - 1) * w) / chiSquareQuantile((k + 0.5) / 200, nu))
    return node * (1 + P / T)
  })
  const F = (r: number): number => ratios.reduce((s, v) => s + nbCdf(r, mean / (v - 1), 1 / v), 0) / 200
  let high = 1
  while (F(high) < input.serviceLevel) high *= 2
  let low = -1
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2)
    if (F(middle) >= input.serviceLevel) high = middle
    else low = middle
  }
  return high
}

const timed = (work: () => void): number => {
  const start = process.hrtime.bigint()
  work()
  return Number(process.hrtime.bigint() - start) / 1e6
}

const ours = (): void => histories.forEach((h) => void reorderPoint(h))
const theirs = (): void => histories.forEach((h) => void plain(h))
const differ = histories.filter((h) => reorderPoint(h).reorderPoint !== plain(h)).length
ours()
theirs()
const rounds = Array.from({ length: 5 }, () => [timed(ours), timed(theirs)] as const)
const median = (values: number[]): number => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!
const a = median(rounds.map((r) => r[0]))
const b = median(rounds.map((r) => r[1]))
process.stdout.write(
  `policy: whole policies with explanation for ${histories.length} bins in ${a.toFixed(0)} ms (${(a / histories.length).toFixed(2)} ms each); ` +
    `the bare quantile by the formula with @stdlib in ${b.toFixed(0)} ms; ratio ${(a / b).toFixed(2)}; ${differ} of ${histories.length} reorder points differ\n`,
)
