import { resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The project's own folder, wherever the command was called from. */
export const root = fileURLToPath(new URL('../..', import.meta.url))
export const inRoot = (...parts) => resolve(root, ...parts)
/** Data of this installation: database files, secrets, caught mail. */
export const dataDir = () => resolve(root, process.env.DATA_DIR || '.data')
