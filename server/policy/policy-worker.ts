import { parentPort } from 'node:worker_threads'
import { mixtureLevels } from '#shared/policy/mixture-batch.ts'
import type { MixtureBatch } from '#shared/policy/mixture-batch.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import type { PolicyResult } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

/** Whole policies, or the bare levels of a batch whose memory was handed over. */
export type PolicyQuestion = { id: number; inputs: PolicyInput[] } | { id: number; batch: MixtureBatch }

/** The answer to the question with that id; `points` come back without a copy. */
export type PolicyAnswer = { id: number; results: PolicyResult[] } | { id: number; points: Int32Array }

const port = parentPort
if (port === null) throw new Error('policy-worker runs as a thread of the server')

// An input that cannot be computed ends the thread: stored inputs have all been computed before.
port.on('message', (question: PolicyQuestion) => {
  if ('batch' in question) {
    const points = mixtureLevels(question.batch)
    port.postMessage({ id: question.id, points } satisfies PolicyAnswer, [points.buffer as ArrayBuffer])
  } else {
    port.postMessage({
      id: question.id,
      results: question.inputs.map((input) => reorderPoint(input)),
    } satisfies PolicyAnswer)
  }
})
