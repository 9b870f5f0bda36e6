const BOUNCE_MS = 80

/**
 * Tells key bounce: a second identical tap within 80 ms of the last one that counted.
 * @returns takes a key and its time in milliseconds; true when it is to be ignored
 */
export function makeBounce(): (key: string, at: number) => boolean {
  let last = { key: '', at: -Infinity }
  return (key, at) => {
    if (key === last.key && at - last.at < BOUNCE_MS) return true
    last = { key, at }
    return false
  }
}
