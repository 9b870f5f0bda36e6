import type { FieldError } from '#shared/kernel/problem.ts'

/**
 * A policy input that cannot be computed: a figure out of range, an unknown field, or a method that does not fit.
 *
 * `pointer` (RFC 6901, into the input) and `detail` are those of the first fault, `errors` lists all of them.
 * The server answers it as 422.
 */
export class PolicyInputError extends Error {
  readonly errors: FieldError[]

  constructor(errors: [FieldError, ...FieldError[]]) {
    super(`${errors[0].pointer || '/'}: ${errors[0].detail}`)
    this.name = 'PolicyInputError'
    this.errors = errors
  }

  get pointer(): string {
    return this.errors[0]!.pointer
  }

  get detail(): string {
    return this.errors[0]!.detail
  }
}

/** A PolicyInputError with one fault. */
export function refused(pointer: string, detail: string): PolicyInputError {
  return new PolicyInputError([{ pointer, detail }])
}
