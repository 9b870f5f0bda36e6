const step = (key: string | number): string => `/${String(key).replaceAll('~', '~0').replaceAll('/', '~1')}`

/** JSON pointer (RFC 6901) of a path. */
export const pointerOf = (path: readonly PropertyKey[]): string => path.map((key) => step(String(key))).join('')

/**
 * Where a value holds text that is no Unicode (half of a surrogate pair), which no database keeps; null where it does not.
 */
export function illFormedAt(value: unknown, at = ''): string | null {
  if (typeof value === 'string') return value.isWellFormed() ? null : at
  if (value === null || typeof value !== 'object') return null
  for (const [key, inner] of Object.entries(value)) {
    if (!key.isWellFormed()) return at
    const found = illFormedAt(inner, at + step(key))
    if (found !== null) return found
  }
  return null
}

/** The same value with what cannot be kept replaced, so that it can be looked at all the same. */
export function wellFormed(value: unknown): unknown {
  if (typeof value === 'string') return value.toWellFormed()
  if (Array.isArray(value)) return value.map(wellFormed)
  if (value === null || typeof value !== 'object') return value
  return Object.fromEntries(Object.entries(value).map(([k, v]) => [k.toWellFormed(), wellFormed(v)]))
}
