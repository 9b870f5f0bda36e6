/** One field that was refused; `pointer` is an RFC 6901 JSON pointer into the request. */
export interface FieldError {
  pointer: string
  detail: string
}

/** What a Problem needs to be sent; `title` and `status` come from the table in `contracts/problems.ts`. */
export interface ProblemParts {
  code: string
  status: number
  title: string
  detail: string
  errors?: FieldError[]
  /** Seconds the caller should wait before the next try. */
  retryAfter?: number
  cause?: unknown
}

/**
 * Everything that may go wrong in a way a caller can act on, at any layer.
 * Source of the wire form: RFC 9457, problem details for HTTP APIs.
 */
export class Problem extends Error {
  readonly code: string
  readonly status: number
  readonly title: string
  readonly detail: string
  readonly errors: FieldError[] | undefined
  readonly retryAfter: number | undefined

  constructor(parts: ProblemParts) {
    super(`${parts.code}: ${parts.detail}`, parts.cause === undefined ? undefined : { cause: parts.cause })
    this.name = 'Problem'
    this.code = parts.code
    this.status = parts.status
    this.title = parts.title
    this.detail = parts.detail
    this.errors = parts.errors
    this.retryAfter = parts.retryAfter
  }

  /** The body of an `application/problem+json` reply. */
  toJSON(): { type: string; title: string; status: number; detail: string; code: string; errors?: FieldError[] } {
    return {
      type: `/problems/${this.code}`,
      title: this.title,
      status: this.status,
      detail: this.detail,
      code: this.code,
      ...(this.errors ? { errors: this.errors } : {}),
    }
  }
}
