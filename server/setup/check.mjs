// `npm run check`: types, lint, import rules, formatting, migrations.
import { ensureModules } from './modules.mjs'
import { inRoot, root } from './paths.mjs'
import { run, say, since } from './say.mjs'

await ensureModules()
const bin = (name) => inRoot('node_modules/.bin', name)
const steps = [
  ['Types, shared', bin('tsc'), ['--noEmit', '-p', 'shared']],
  ['Types, server', bin('tsc'), ['--noEmit', '-p', 'server']],
  ['Types, client', bin('vue-tsc'), ['--noEmit', '-p', 'src']],
  ['Types, tests', bin('vue-tsc'), ['--noEmit', '-p', 'tests']],
  ['Lint', bin('eslint'), ['-c', '.config/eslint.config.js', '.', '--max-warnings', '1000', '--quiet']],
  [
    'Import rules',
    bin('depcruise'),
    ['--config', '.config/dependency-cruiser.cjs', '--output-type', 'err', 'server', 'shared', 'src'],
  ],
  ['Formatting', bin('prettier'), ['--check', '.', '--log-level', 'warn']],
  ['Migrations', bin('drizzle-kit'), ['check']],
]
let failed = 0
const waiting = [...steps]
async function work() {
  for (let step = waiting.shift(); step; step = waiting.shift()) {
    const [title, command, args] = step
    const start = Date.now()
    try {
      await run(command, args, { cwd: root })
      say(`${title}: fine, ${since(start)}.`)
    } catch (error) {
      failed += 1
      say(`${title}: not fine.\n${error.message}`)
    }
  }
}
// Two at a time: that is how many cores a small machine has.
await Promise.all([work(), work()])
process.exit(failed ? 1 : 0)
