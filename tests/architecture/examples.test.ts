import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const root = fileURLToPath(new URL('../..', import.meta.url))

interface Example {
  file: string
  code: string
  expected: string
}

function filesUnder(folder: string): string[] {
  return readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.ts') && !name.endsWith('.d.ts'))
    .map((name) => join(folder, name))
}

/** `@example call(…) // => value`, one line each. */
function examplesOf(file: string): Example[] {
  const text = readFileSync(join(root, file), 'utf8')
  return [...text.matchAll(/@example\s+(.+?)\s+\/\/ => (.+?)\s*(?:\*\/)?$/gm)].map((m) => ({
    file,
    code: m[1]!,
    expected: m[2]!,
  }))
}

const examples = filesUnder('shared').flatMap(examplesOf)

describe('every @example in shared/', () => {
  it('is found', () => {
    expect(examples.length).toBeGreaterThan(20)
    const written = filesUnder('shared').reduce(
      (n, f) => n + (readFileSync(join(root, f), 'utf8').match(/@example/g)?.length ?? 0),
      0,
    )
    expect(examples.length).toBe(written)
  })

  it.each(examples)('$file: $code', async ({ file, code, expected }) => {
    const module = (await import(join(root, file))) as Record<string, unknown>
    const run = (expression: string): unknown =>
      new Function(...Object.keys(module), `return (${expression})`)(...Object.values(module))
    const value = run(code)
    const wanted = run(expected)
    if (typeof wanted === 'number' && !Number.isInteger(wanted)) {
      const digits = expected.split('.')[1]?.length ?? 6
      expect(value).toBeCloseTo(wanted, Math.min(12, digits - 1))
    } else expect(value).toEqual(wanted)
  })
})
