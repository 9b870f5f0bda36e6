import { closeSync, mkdirSync, openSync, readFileSync, rmSync, writeSync } from 'node:fs'
import { join } from 'node:path'
import { alive } from './mariadb.mjs'
import { giveUp } from './say.mjs'

/** Keeps a second start off the same data folder; a lock whose owner died is taken over. @returns how to let go */
export function lockFolder(folder) {
  mkdirSync(folder, { recursive: true })
  const file = join(folder, 'start.lock')
  for (let tries = 0; tries < 2; tries += 1) {
    try {
      const fd = openSync(file, 'wx')
      writeSync(fd, String(process.pid))
      closeSync(fd)
      return () => rmSync(file, { force: true })
    } catch (error) {
      if (error.code !== 'EEXIST') throw error
      const owner = Number(readFileSync(file, 'utf8') || 0)
      if (owner && alive(owner) && isStart(owner))
        giveUp(`Brimline already runs on ${folder} (process ${owner}). Stop it first, or set DATA_DIR.`)
      rmSync(file, { force: true })
    }
  }
  giveUp(`The lock ${file} could not be taken. Try again.`)
}

/** The number may belong to another program by now. */
function isStart(pid) {
  try {
    return /setup\/(start|dev|rebuild)\.mjs/.test(readFileSync(`/proc/${pid}/cmdline`, 'utf8'))
  } catch {
    return true
  }
}
