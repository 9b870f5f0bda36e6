import { createRequire } from 'node:module'
import { availableParallelism } from 'node:os'
import { pathToFileURL } from 'node:url'
import { Worker } from 'node:worker_threads'
import {
  batchBuffers,
  computedReorderPoints,
  NOT_COVERED,
  packBatch,
  type MixtureBatch,
} from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'
import type { PolicyAnswer, PolicyQuestion } from './policy-worker.ts'

/** Threads that work out policies while the main one talks to the database. */
export interface PolicyWorkers {
  /** Results in the order of the inputs. @throws {Error} when a thread fails: the run is then tried again as a whole */
  compute(inputs: PolicyInput[]): Promise<PolicyResult[]>
  /** Bare reorder points, as columns of numbers where they can be; null where there is nothing to work out. */
  points(inputs: PolicyInput[]): Promise<(number | null)[]>
  stop(): Promise<void>
}

const mostThreads = 4

/** For a handful of bins. */
export const onThisThread: PolicyWorkers = {
  compute: (inputs) => Promise.resolve(inputs.map(reorderPoint)),
  points: (inputs) => Promise.resolve(computedReorderPoints(inputs)),
  stop: () => Promise.resolve(),
}

/** Built beside the server, the worker is JavaScript; run from source it needs a loader of its own. */
const isSource = import.meta.url.endsWith('.ts')

function startThread(): Worker {
  const thread = isSource ? fromSource() : new Worker(new URL('./policy-worker.js', import.meta.url))
  thread.unref()
  return thread
}

function fromSource(): Worker {
  const loader = pathToFileURL(
    createRequire(import.meta.url)
      .resolve('tsx/esm/api')
      .replace(/\.cjs$/, '.mjs'),
  ).href
  const entry = new URL('./policy-worker.ts', import.meta.url).href
  const boot = `import('${loader}').then(({ register }) => { register(); return import('${entry}') })`
  return new Worker(boot, { eval: true })
}

/** Starts as many threads as the machine has cores, at most four, with the first work that comes. */
export function startPolicyWorkers(threads = Math.min(mostThreads, availableParallelism())): PolicyWorkers {
  const running: Worker[] = []
  let nextId = 0
  const ask = (
    thread: Worker,
    question: { inputs: PolicyInput[] } | { batch: MixtureBatch },
    handedOver: ArrayBuffer[] = [],
  ): Promise<PolicyAnswer> =>
    new Promise((resolve, reject) => {
      nextId += 1
      const id = nextId
      const done = (): void => {
        thread.off('message', heard)
        thread.off('error', failed)
        thread.off('exit', ended)
      }
      const heard = (answer: PolicyAnswer): void => {
        if (answer.id !== id) return
        done()
        resolve(answer)
      }
      const failed = (error: Error): void => {
        done()
        reject(error)
      }
      const ended = (code: number): void => failed(new Error(`a policy thread ended with ${code}`))
      thread.on('message', heard)
      thread.on('error', failed)
      thread.on('exit', ended)
      thread.postMessage({ id, ...question } satisfies PolicyQuestion, handedOver)
    })
  /** Every thread takes an equal run of neighbouring inputs. */
  const shared = async <T>(inputs: PolicyInput[], work: (thread: Worker, own: PolicyInput[]) => Promise<T[]>) => {
    if (inputs.length === 0) return []
    while (running.length < threads) running.push(startThread())
    const share = Math.ceil(inputs.length / running.length)
    const parts = running.map((thread, i) => work(thread, inputs.slice(i * share, (i + 1) * share)))
    return (await Promise.all(parts)).flat()
  }
  const results = async (thread: Worker, inputs: PolicyInput[]): Promise<PolicyResult[]> => {
    if (inputs.length === 0) return []
    const answer = await ask(thread, { inputs })
    return 'results' in answer ? answer.results : []
  }
  return {
    compute: (inputs) => shared(inputs, results),
    points: (inputs) =>
      shared(inputs, async (thread, own) => {
        const points: (number | null)[] = own.map(() => null)
        const { batch, covered, rest } = packBatch(own)
        const answer = await ask(thread, { batch }, batchBuffers(batch))
        const levels = 'points' in answer ? answer.points : new Int32Array()
        const left = [...rest]
        levels.forEach((level, k) => {
          if (level === NOT_COVERED) left.push(covered[k]!)
          else points[covered[k]!] = level
        })
        const whole = await results(
          thread,
          left.map((i) => own[i]!),
        )
        left.forEach((i, k) => (points[i] = whole[k]!.computedReorderPoint))
        return points
      }),
    async stop() {
      await Promise.all(running.map((thread) => thread.terminate()))
    },
  }
}
