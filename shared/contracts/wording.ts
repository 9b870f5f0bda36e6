import type { z } from 'zod'

const kinds: Record<string, string> = {
  number: 'give a number',
  int: 'give a whole number',
  string: 'give text',
  boolean: 'give true or false',
  array: 'give a list',
  object: 'give an object',
  record: 'give an object',
}
const formats: Record<string, string> = {
  datetime: 'give a time in UTC with milliseconds, such as 2026-12-01T08:00:00.000Z',
  date: 'give a day, such as 2026-12-01',
}

/**
 * Says in plain words what to do about one refused field. Sentences a contract wrote itself are kept.
 * @example wordIssue({ code: 'invalid_type', expected: 'number', input: undefined, path: [], message: 'Invalid input: expected number, received undefined' }) // => 'this is needed'
 */
export function wordIssue(issue: z.core.$ZodIssue): string {
  const own = !/^(Invalid|Too (small|big))/.test(issue.message)
  if (own) return issue.message
  switch (issue.code) {
    case 'invalid_type':
      return /received undefined$/.test(issue.message)
        ? 'this is needed'
        : (kinds[issue.expected] ?? 'this cannot be read')
    case 'invalid_value':
      return `choose one of: ${issue.values.map(String).join(', ')}`
    case 'too_small':
      return `at least ${String(issue.minimum)}${unitOf(issue.origin)}`
    case 'too_big':
      return `at most ${String(issue.maximum)}${unitOf(issue.origin)}`
    case 'invalid_format':
      return formats[issue.format] ?? 'this does not have the right form'
    case 'invalid_union':
      return issue.errors[0]?.[0] ? wordIssue(issue.errors[0][0]) : 'this cannot be read'
    default:
      return issue.message
  }
}

const unitOf = (origin: string): string => (origin === 'string' ? ' characters' : origin === 'array' ? ' entries' : '')
