import { execFileSync, spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { isMainThread, parentPort, Worker } from 'node:worker_threads'
import nbCdf from '@stdlib/stats-base-dists-negative-binomial-cdf'
import { drawInteger, seededRandom } from '#shared/kernel/random.ts'
import { drawNegativeBinomial } from '#shared/kernel/random-laws.ts'
import { batchBuffers, mixtureLevels, packBatch } from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import { chiSquareQuantile } from '#shared/stats/chi-square-quantile.ts'

/*
 * Reorder points of 100,000 bins by the default method: the batch engine against the formula written down plainly, one
 * distribution function per node and step with a general library (@stdlib). Run: `npm run bench:policy`; `BENCH_BINS` asks for another number.
 * Both read the same bins in the same thread, chunk after chunk, so that a busy machine slows both alike.
 */
const perChunk = 1000
const bins = Number(process.env.BENCH_BINS ?? 100_000)
const leastRatio = 8
const leastThreads = 1.7

/** Bins as wards have them: 4 to 80 counts 1 to 9 days apart, 0.1 to 300 units over the protection interval. */
function chunkOf(chunk: number): PolicyInput[] {
  const random = seededRandom(`policy bins ${chunk}`)
  return Array.from({ length: perChunk }, () => {
    const leadDays = 1 + 4 * random()
    const reviewPeriodDays = 1 + 6 * random()
    const perDay = (0.1 * 3000 ** random()) / (leadDays + reviewPeriodDays)
    const ratio = 1 + 7 * random() ** 2
    const count = drawInteger(random, 4, 80)
    const isWeighted = random() < 0.4
    const intervals = Array.from({ length: count }, (_, i) => {
      const days = 1 + 8 * random()
      const quantity = drawNegativeBinomial(random, perDay * days, ratio)
      return isWeighted ? { days, quantity, weight: 2 ** ((i - count) / 24) } : { days, quantity }
    })
    const rate = { a: 1 + 9 * random(), b: 0 }
    rate.b = rate.a / perDay
    const isPooled = random() < 0.3
    return {
      intervals,
      leadTime: { meanDays: leadDays, sdDays: random() < 0.25 ? leadDays / 3 : 0 },
      reviewPeriodDays,
      serviceLevel: 0.9 + 0.099 * random(),
      ...(isPooled ? { prior: { nu0: 8, w0: 1 + 2 * random(), rate: random() < 0.7 ? rate : null } } : {}),
    }
  })
}

const knownNodes = new Map<number, number[]>()
function nodesOf(nu: number): number[] {
  let nodes = knownNodes.get(nu)
  if (!nodes) {
    nodes = Array.from({ length: 200 }, (_, k) => chiSquareQuantile((k + 0.5) / 200, nu))
    // Weighted bins have degrees of freedom of their own: keeping those would only fill the memory.
    if (Number.isInteger(nu)) knownNodes.set(nu, nodes)
  }
  return nodes
}

/** Statistics 4.6 with the weights of 4.12, line by line. */
function plain(input: PolicyInput): number {
  const rows = input.intervals!.map((row) => ({ t: row.days, x: row.quantity, o: row.weight ?? 1 }))
  const sum = (of: (row: (typeof rows)[number]) => number): number => rows.reduce((s, row) => s + of(row), 0)
  const P = input.leadTime.meanDays + input.reviewPeriodDays!
  const vP = input.leadTime.sdDays! ** 2
  const mu = sum((r) => r.o * r.x) / sum((r) => r.o * r.t)
  const T = sum((r) => r.o * r.t) ** 2 / sum((r) => r.o * r.o * r.t)
  const n = sum((r) => r.o) ** 2 / sum((r) => r.o * r.o)
  const divisor = sum((r) => r.o) - sum((r) => r.o * r.o * r.t) / sum((r) => r.o * r.t)
  const s2 = sum((r) => (r.o * (r.x - mu * r.t) ** 2) / r.t) / divisor
  const w = mu > 0 ? s2 / mu : 1
  const { nu0 = 4, w0 = 2, rate } = input.prior ?? {}
  const X = Math.max(0, mu * T)
  const nu = nu0! + n - 1
  const parts = nodesOf(nu).map((chi) => {
    const node = Math.max(1, (nu0! * w0! + (n - 1) * w) / chi)
    const m = rate ? (P * (rate.a + X / node)) / (rate.b + T / node) : (P * (X + 0.5)) / T
    const spread = (m * vP) / (P * P)
    const vmr = (rate ? node + P / (rate.b + T / node) : node * (1 + P / T)) + spread
    return { size: m / (vmr - 1), q: 1 / vmr }
  })
  const F = (r: number): number => parts.reduce((s, { size, q }) => s + nbCdf(r, size, q), 0) / 200
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

const now = (): number => Number(process.hrtime.bigint()) / 1e6

interface Compared {
  packed: number
  batch: number
  plain: number
  policies: number
  differ: number
  points: number
}

/** One chunk both ways; whole policies too, for a twentieth of its bins. */
function compare(chunk: number): Compared {
  const inputs = chunkOf(chunk)
  const start = now()
  const { batch, covered, rest } = packBatch(inputs)
  const packed = now()
  const levels = mixtureLevels(batch)
  const done = now()
  const expected = inputs.map(plain)
  const end = now()
  const some = inputs.slice(0, perChunk / 20)
  const whole = some.map((input) => reorderPoint(input).computedReorderPoint)
  const last = now()
  const got = new Map([...covered].map((i, k) => [i, levels[k]!]))
  const differ =
    rest.length + expected.filter((r, i) => got.get(i) !== r || (i < whole.length && whole[i] !== r)).length
  const points = expected.reduce((s, r) => s + r, 0)
  return { packed: packed - start, batch: done - packed, plain: end - done, policies: last - end, differ, points }
}

type Question = { compare: number } | { batch: ReturnType<typeof packBatch>['batch'] }

/** A thread that reads TypeScript: the loader given to a process does not reach its threads. */
function startThread(): Worker {
  const file = JSON.stringify(import.meta.url)
  return new Worker(`import { register } from 'tsx/esm/api'; register(); await import(${file})`, { eval: true })
}

const ask = <T>(thread: Worker, question: Question, transfer: ArrayBuffer[] = []): Promise<T> =>
  new Promise((resolve, reject) => {
    thread.once('message', (answer: T) => {
      thread.off('error', reject)
      resolve(answer)
    })
    thread.once('error', reject)
    thread.postMessage(question, transfer)
  })

/** Every thread takes the next piece of work when it is done with its last. */
async function shareOut<Q, A>(threads: Worker[], work: Q[], run: (thread: Worker, piece: Q) => Promise<A>) {
  const waiting = [...work]
  const answers: A[] = []
  const worker = async (thread: Worker): Promise<void> => {
    for (let piece = waiting.shift(); piece !== undefined; piece = waiting.shift())
      answers.push(await run(thread, piece))
  }
  await Promise.all(threads.map(worker))
  return answers
}

async function main(): Promise<void> {
  const threads = [startThread(), startThread()]
  const chunks = Array.from({ length: Math.ceil(bins / perChunk) }, (_, i) => i)
  const parts = await shareOut(threads, chunks, (thread, chunk) => ask<Compared>(thread, { compare: chunk }))
  const sum = (of: keyof Compared): number => parts.reduce((s, part) => s + part[of], 0)
  const count = chunks.length * perChunk
  const ours = sum('batch') + sum('packed')
  const ratio = sum('plain') / ours
  const each = (ms: number, of = count): string => `${(ms / of).toFixed(4)} ms`
  say(
    `policy: ${count} reorder points by the default method, the same bins both ways, ` +
      `mean level ${(sum('points') / count).toFixed(1)}`,
  )
  say(`  batch engine ${each(sum('batch'))} a bin, ${each(ours)} with checking and packing the inputs`)
  say(
    `  plain loop, one @stdlib distribution function per node and step: ${each(sum('plain'))} a bin ` +
      `(${(sum('plain') / 1000).toFixed(0)} s of one thread: the sum over chunks run in two)`,
  )
  say(`  ratio ${ratio.toFixed(1)} (at least ${leastRatio}); ${sum('differ')} reorder points differ`)
  say(`  whole policies with explanation: ${each(sum('policies'), count / 20)} a bin`)
  await compareThreads(threads, chunks)
  await Promise.all(threads.map((thread) => thread.terminate()))
  compareWithR()
  if (sum('differ') > 0 || ratio < leastRatio) process.exitCode = 1
}

/** The batch engine in two threads against one, the faster of five runs each, batches handed over without a copy. */
async function compareThreads(threads: Worker[], chunks: number[]): Promise<void> {
  const batches = chunks.slice(0, 20).map((chunk) => packBatch(chunkOf(chunk)).batch)
  const timed = async (some: Worker[]): Promise<number> => {
    const copies = batches.map((batch) => structuredClone(batch))
    const start = now()
    await shareOut(some, copies, (thread, batch) => ask<Int32Array>(thread, { batch }, batchBuffers(batch)))
    return now() - start
  }
  let one = Infinity
  let two = Infinity
  for (let round = 0; round < 5; round++) {
    one = Math.min(one, await timed(threads.slice(0, 1)))
    two = Math.min(two, await timed(threads))
  }
  const gain = one / two
  const note = gain < leastThreads ? `, below the ${leastThreads} of two free cores` : ''
  say(`  two threads against one: ${gain.toFixed(2)} times as fast${note}`)
}

/** The same formula in vectorised R, over the first chunk. */
function compareWithR(): void {
  if (spawnSync('Rscript', ['--version']).error) {
    say('  R is not installed')
    return
  }
  const folder = mkdtempSync(join(tmpdir(), 'brimline-r-'))
  try {
    const inputs = chunkOf(0)
    const rows = inputs.flatMap((input, i) =>
      input.intervals!.map(({ days, quantity, weight }) => [i + 1, days, quantity, weight ?? 1].join(' ')),
    )
    const heads = inputs.map(({ leadTime, reviewPeriodDays, serviceLevel, prior }) =>
      [
        ...[leadTime.meanDays + reviewPeriodDays!, leadTime.sdDays! ** 2, serviceLevel],
        ...[prior?.nu0 ?? 4, prior?.w0 ?? 2, prior?.rate?.a ?? 'NA', prior?.rate?.b ?? 'NA'],
      ].join(' '),
    )
    writeFileSync(join(folder, 'rows.txt'), rows.join('\n'))
    writeFileSync(join(folder, 'bins.txt'), heads.join('\n'))
    writeFileSync(join(folder, 'mixture.R'), mixtureInR)
    const out = execFileSync('Rscript', ['mixture.R'], { cwd: folder, encoding: 'utf8' }).trim().split(/\s+/)
    const [seconds, ...levels] = out.map(Number)
    const expected = mixtureLevels(packBatch(inputs).batch)
    const differ = levels.filter((level, i) => level !== expected[i]).length
    say(`  R, vectorised over the nodes: ${((seconds! * 1000) / inputs.length).toFixed(3)} ms a bin; ${differ} differ`)
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

const mixtureInR = `
rows <- as.matrix(read.table('rows.txt')); bins <- as.matrix(read.table('bins.txt'))
parts <- split(seq_len(nrow(rows)), rows[, 1])
level <- function(i) {
  d <- rows[parts[[i]], , drop = FALSE]; t <- d[, 2]; x <- d[, 3]; o <- d[, 4]; h <- bins[i, ]
  P <- h[1]; mu <- sum(o * x) / sum(o * t)
  T <- sum(o * t)^2 / sum(o^2 * t); n <- sum(o)^2 / sum(o^2)
  s2 <- sum(o * (x - mu * t)^2 / t) / (sum(o) - sum(o^2 * t) / sum(o * t))
  w <- if (mu > 0) s2 / mu else 1
  X <- max(0, mu * T); nu <- h[4] + n - 1
  wk <- pmax(1, (h[4] * h[5] + (n - 1) * w) / qchisq((1:200 - .5) / 200, nu))
  if (is.na(h[6])) { m <- rep(P * (X + .5) / T, 200); v <- wk * (1 + P / T) }
  else { m <- P * (h[6] + X / wk) / (h[7] + T / wk); v <- wk + P / (h[7] + T / wk) }
  v <- v + m * h[2] / P^2
  reached <- function(r) mean(pnbinom(r, size = m / (v - 1), prob = 1 / v)) >= h[3]
  high <- 1; while (!reached(high)) high <- high * 2
  low <- -1
  while (high - low > 1) { k <- (low + high) %/% 2; if (reached(k)) high <- k else low <- k }
  high
}
seconds <- system.time(r <- vapply(seq_len(nrow(bins)), level, 0))[['elapsed']]
cat(seconds, r, fill = FALSE)
`

function say(line: string): void {
  process.stdout.write(`${line}\n`)
}

if (isMainThread) await main()
else
  parentPort!.on('message', (question: Question) => {
    if ('compare' in question) parentPort!.postMessage(compare(question.compare))
    else {
      const points = mixtureLevels(question.batch)
      parentPort!.postMessage(points, [points.buffer as ArrayBuffer])
    }
  })
