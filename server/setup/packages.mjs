import { accessSync, constants, existsSync, readdirSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { giveUp, run, say, since } from './say.mjs'

/** Where a program stands; Debian keeps servers outside an ordinary user's PATH. */
export function which(name) {
  for (const dir of [...(process.env.PATH ?? '').split(delimiter), '/usr/sbin', '/usr/local/sbin', '/sbin']) {
    const path = join(dir, name)
    try {
      accessSync(path, constants.X_OK)
      return path
    } catch {
      // not here
    }
  }
  return null
}

const listsMissing = () => {
  try {
    return !readdirSync('/var/lib/apt/lists').some((name) => name.endsWith('_Packages') || name.includes('_Packages.'))
  } catch {
    return true
  }
}

/** Installs Debian packages when a program they bring is missing; never a service. */
export async function ensurePackages(packages, programs, what) {
  if (programs.every((program) => which(program))) return
  const names = packages.join(' ')
  if (!existsSync('/usr/bin/apt-get'))
    giveUp(`${what} is missing and this is no Debian: install ${names} (or set DATABASE_URL), then try again.`)
  if (process.getuid?.() !== 0) giveUp(`${what} is missing: run "sudo apt-get install ${names}", then try again.`)
  const start = Date.now()
  say(`Installing ${what} …`)
  const apt = ['-y', '-o', 'DPkg::Lock::Timeout=120', '-o', 'Acquire::Retries=3']
  const env = { DEBIAN_FRONTEND: 'noninteractive' }
  const install = () =>
    run('apt-get', ['install', ...apt, '--no-install-recommends', ...packages], { title: what, env })
  try {
    if (listsMissing()) await run('apt-get', ['update', ...apt.slice(1)], { title: 'package lists', env })
    await install().catch(async () => {
      // Old lists name packages that are gone: fetch them anew and try once more.
      await run('apt-get', ['update', ...apt.slice(1)], { title: 'package lists', env })
      await install()
    })
  } catch (error) {
    giveUp(`${what} could not be installed. Install ${names} by hand, then try again.\n${error.message}`)
  }
  say(`${what} installed, ${since(start)}.`)
}
