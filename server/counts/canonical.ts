import { createHash } from 'node:crypto'

function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted)
  if (value === null || typeof value !== 'object') return value
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))
      .map(([k, v]) => [k, sorted(v)]),
  )
}

/** SHA-256 over the received item with sorted keys: the same entry sent again is told from another under its id. */
export const payloadHash = (item: unknown): string =>
  createHash('sha256')
    .update(JSON.stringify(sorted(item)))
    .digest('hex')
