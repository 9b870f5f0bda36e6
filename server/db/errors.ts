import { problem } from '#shared/contracts/problems.ts'
import { Problem } from '#shared/kernel/problem.ts'

interface DriverError {
  errno?: number
  code?: string
  sqlMessage?: string
}

/** The driver's error inside whatever wrapped it, or null. */
export function driverError(error: unknown): DriverError | null {
  for (let e: unknown = error, depth = 0; e && typeof e === 'object' && depth < 5; depth += 1) {
    if ('errno' in e && typeof e.errno === 'number') return e as DriverError
    if ('code' in e && typeof e.code === 'string' && /^(ECONN|PROTOCOL_|EPIPE|ETIMEDOUT)/.test(e.code))
      return e as DriverError
    e = 'cause' in e ? e.cause : null
  }
  return null
}

/** Deadlock, lock wait, write conflict, cluster not ready: the whole transaction may be tried again. */
const retryable = new Set([1213, 1205, 1020, 1047])

export const isRetryable = (error: unknown): boolean => retryable.has(driverError(error)?.errno ?? 0)
export const isDuplicate = (error: unknown): boolean => driverError(error)?.errno === 1062

/** The database cannot be reached at all. */
export const isUnreachable = (error: unknown): boolean =>
  /^(ECONN|PROTOCOL_|EPIPE|ETIMEDOUT|ER_ACCESS|ER_CON_COUNT)/.test(driverError(error)?.code ?? '')

/** Name of the unique key a duplicate ran into; the driver gives it in the message only. */
export function duplicateKey(error: unknown): string {
  return /for key '([^']+)'/.exec(driverError(error)?.sqlMessage ?? '')?.[1] ?? ''
}

/** Maps what the database refused to what a person can act on; anything unknown stays as it is. */
export function toProblem(error: unknown): unknown {
  if (error instanceof Problem) return error
  const driver = driverError(error)
  if (!driver) return error
  if (driver.errno === 1062) return problem('already-exists', undefined, { cause: error })
  if (driver.errno === 1451) return problem('in-use', undefined, { cause: error })
  if (driver.errno === 1452) return problem('not-found', 'Something this refers to does not exist.', { cause: error })
  if (isUnreachable(error)) {
    return problem('not-ready', undefined, { cause: error })
  }
  return error
}
