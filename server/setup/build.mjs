import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { brotliCompressSync, constants, gzipSync } from 'node:zlib'
import { ensureModules } from './modules.mjs'
import { inRoot, root } from './paths.mjs'
import { giveUp, run, say, since } from './say.mjs'

const stampFile = inRoot('.build/stamps.json')
const sources = {
  client: ['src', 'shared', 'public', 'index.html', 'vite.config.ts', 'package-lock.json'],
  server: ['server', 'shared', 'package-lock.json'],
}

function* filesUnder(path) {
  if (!existsSync(path)) return
  if (statSync(path).isFile()) yield path
  else for (const name of readdirSync(path).sort()) yield* filesUnder(join(path, name))
}

/** One number for everything a part is built from. */
function hashOf(part) {
  const hash = createHash('sha256').update(process.version)
  for (const source of sources[part]) {
    for (const file of filesUnder(inRoot(source))) hash.update(file.slice(root.length)).update(readFileSync(file))
  }
  return hash.digest('hex')
}

const stamps = () => {
  try {
    return JSON.parse(readFileSync(stampFile, 'utf8'))
  } catch {
    return {}
  }
}

function remember(part, hash) {
  mkdirSync(inRoot('.build'), { recursive: true })
  writeFileSync(stampFile, JSON.stringify({ ...stamps(), [part]: hash }))
}

/** Compressed copies beside the files: the server sends them as they are. */
function compress(folder) {
  for (const file of filesUnder(folder)) {
    if (!/\.(js|css|html|svg|json|webmanifest|txt)$/.test(file)) continue
    const bytes = readFileSync(file)
    if (bytes.length < 1_000) continue
    const params = { [constants.BROTLI_PARAM_QUALITY]: 9, [constants.BROTLI_PARAM_SIZE_HINT]: bytes.length }
    writeFileSync(`${file}.br`, brotliCompressSync(bytes, { params }))
    writeFileSync(`${file}.gz`, gzipSync(bytes, { level: 8 }))
  }
}

async function buildClient() {
  await run(process.execPath, [inRoot('node_modules/vite/bin/vite.js'), 'build', '--logLevel', 'warn'], {
    title: 'client',
    cwd: root,
  })
  compress(inRoot('.build/client'))
}

async function buildServer() {
  const { build } = await import('esbuild')
  await build({
    absWorkingDir: root,
    entryPoints: { main: 'server/main.ts', 'policy-worker': 'server/policy/policy-worker.ts' },
    outdir: '.build/server',
    bundle: true,
    splitting: false,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    packages: 'external',
    sourcemap: true,
    logLevel: 'warning',
  })
}

/** Builds what changed since it was last built. */
export async function ensureBuilt(parts = ['client', 'server']) {
  for (const part of parts) {
    const hash = hashOf(part)
    const output = part === 'client' ? inRoot('.build/client/index.html') : inRoot('.build/server/main.js')
    if (existsSync(output) && stamps()[part] === hash) continue
    const start = Date.now()
    if (part === 'client') say('Building the client (about 20 seconds) …')
    await (part === 'client' ? buildClient() : buildServer()).catch((error) => {
      giveUp(`The ${part} could not be built.\n${error.message}`)
    })
    remember(part, hash)
    say(`${part === 'client' ? 'Client' : 'Server'} built, ${since(start)}.`)
  }
}

if (
  import.meta.url === pathToFileURL(process.argv[1] ?? '').href ||
  fileURLToPath(import.meta.url) === process.argv[1]
) {
  await ensureModules()
  await ensureBuilt()
}
