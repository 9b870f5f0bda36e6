import { spawn } from 'node:child_process'

/** One plain line per step. */
export const say = (line) => process.stdout.write(`${line}\n`)

/** Ends with one line that says what to do. */
export function giveUp(line) {
  process.stderr.write(`${line}\n`)
  process.exit(1)
}

/** "12 s" since a moment. */
export const since = (start) => `${Math.max(1, Math.round((Date.now() - start) / 1000))} s`

/**
 * Runs a command and waits; its output is kept and shown only when it fails.
 * While it runs, a line every ten seconds says that it still does.
 */
export function run(command, args, { title, env, cwd, show = false } = {}) {
  const start = Date.now()
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      env: { ...process.env, ...env },
      cwd,
      stdio: ['ignore', show ? 'inherit' : 'pipe', show ? 'inherit' : 'pipe'],
    })
    let output = ''
    const keep = (chunk) => {
      output = (output + chunk).slice(-20_000)
    }
    child.stdout?.on('data', keep)
    child.stderr?.on('data', keep)
    const ticking = title ? setInterval(() => say(`  ${title}: still working, ${since(start)}`), 10_000) : null
    child.on('error', (error) => {
      if (ticking) clearInterval(ticking)
      reject(error)
    })
    child.on('exit', (code) => {
      if (ticking) clearInterval(ticking)
      if (code === 0) resolve(output)
      else reject(new Error(`${command} ${args.join(' ')} ended with ${code}\n${output}`))
    })
  })
}
