import { Problem, type FieldError } from '#shared/kernel/problem.ts'

/** The one table of problems: code → status, title, and the sentence used when the thrower gives none. Sorted by code. */
export const problemTable = {
  'already-decided': {
    status: 409,
    title: 'Already decided',
    detail: 'Somebody has decided this already. Look at it again.',
  },
  'already-exists': {
    status: 409,
    title: 'Already exists',
    detail: 'There is one with this code already. Choose another code.',
  },
  'bad-credentials': {
    status: 401,
    title: 'Not signed in',
    detail: 'E-mail, staff code or password do not match. Try again or ask for a new password.',
  },
  'batch-too-large': {
    status: 413,
    title: 'Too many at once',
    detail: 'Send at most 100 entries and 64 KB at a time.',
  },
  'cross-site': { status: 403, title: 'Refused', detail: 'This request came from another site.' },
  'in-another-draft': {
    status: 409,
    title: 'In another draft',
    detail: 'Another draft holds some of these places already. Open that draft, or leave them out.',
  },
  'in-use': {
    status: 409,
    title: 'Still in use',
    detail: 'Something still depends on this. Move or retire that first.',
  },
  internal: {
    status: 500,
    title: 'Something broke on our side',
    detail: 'Nothing was changed. Try again; if it stays, tell your administrator the request number.',
  },
  'invalid-request': {
    status: 422,
    title: 'Check the marked fields',
    detail: 'Some fields cannot be used as they are.',
  },
  'link-used-up': {
    status: 410,
    title: 'Link no longer valid',
    detail: 'This link was used or has run out. Ask for a new one.',
  },
  'marker-missing': { status: 403, title: 'Refused', detail: 'Writes carry the header X-Brimline: 1.' },
  'not-allowed': {
    status: 403,
    title: 'Not allowed',
    detail: 'Your role does not include this. Ask a person who has it.',
  },
  'not-found': { status: 404, title: 'Not found', detail: 'There is no such thing here, or it is outside your rooms.' },
  'not-json': { status: 415, title: 'Wrong kind of body', detail: 'Send the body as application/json.' },
  'not-ready': { status: 503, title: 'Not ready', detail: 'The database does not answer. Try again in a moment.' },
  'not-signed-in': { status: 401, title: 'Not signed in', detail: 'Sign in first.' },
  'order-changed': {
    status: 409,
    title: 'Order changed',
    detail: 'This order has moved on. Open it again before you change it.',
  },
  'order-not-sent': { status: 409, title: 'Order not sent yet', detail: 'A draft has no document. Send it first.' },
  'own-proposal': {
    status: 409,
    title: 'A second person decides',
    detail: 'You proposed this. Somebody else has to decide it.',
  },
  'owner-mismatch': {
    status: 409,
    title: 'Another person signed in',
    detail: 'These entries belong to another person. They stay on the phone until that person signs in.',
  },
  'too-many-attempts': { status: 429, title: 'Too many tries', detail: 'Wait a little, then try again.' },
  'unreadable-body': { status: 400, title: 'Body cannot be read', detail: 'The body is not valid JSON.' },
} as const satisfies Record<string, { status: number; title: string; detail: string }>

/** Kebab-case code of a problem. */
export type ProblemCode = keyof typeof problemTable

/**
 * Makes the one error type that leaves a service.
 * @param detail replaces the table's sentence where the case can say more
 */
export function problem(
  code: ProblemCode,
  detail?: string,
  more: { errors?: FieldError[]; retryAfter?: number; cause?: unknown } = {},
): Problem {
  const entry = problemTable[code]
  return new Problem({ code, status: entry.status, title: entry.title, detail: detail ?? entry.detail, ...more })
}

/** A 422 that names one field. */
export function fieldProblem(pointer: string, detail: string): Problem {
  return problem('invalid-request', detail, { errors: [{ pointer, detail }] })
}
