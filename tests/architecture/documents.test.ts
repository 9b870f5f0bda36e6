import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const root = fileURLToPath(new URL('../..', import.meta.url))
const allowed =
  /^(\..*|README\.md|DEVELOPERS\.md|package(-lock)?\.json|vite\.config\.ts|tsconfig\.json|drizzle\.config\.ts|index\.html|src|server|shared|drizzle|tests|public|node_modules)$/

describe('the project', () => {
  it('keeps its fixed top level', () => {
    expect(readdirSync(root).filter((name) => !allowed.test(name))).toEqual([])
  })

  it('names only paths that exist in DEVELOPERS.md and README.md', () => {
    for (const document of ['DEVELOPERS.md', 'README.md']) {
      const text = readFileSync(join(root, document), 'utf8')
      const paths = [
        ...text.matchAll(/`((?:src|server|shared|tests|public|drizzle|\.config)\/[A-Za-z0-9_./-]*)`/g),
      ].map((m) => m[1]!)
      expect(
        paths.filter((path) => !existsSync(join(root, path))),
        document,
      ).toEqual([])
    }
  })

  it('pins every package exactly', () => {
    const { dependencies, devDependencies } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as Record<
      string,
      Record<string, string>
    >
    const loose = Object.entries({ ...dependencies, ...devDependencies }).filter(
      ([, version]) => !/^\d+\.\d+\.\d+$/.test(version),
    )
    expect(loose).toEqual([])
    expect(readFileSync(join(root, 'package-lock.json'), 'utf8')).not.toContain('"resolved":')
  })
})
