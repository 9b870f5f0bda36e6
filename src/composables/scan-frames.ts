import type { Decoded } from '#src/workers/decoder.ts'

/** The part of the camera's picture that is looked at, in its own pixels. */
export interface Region {
  x: number
  y: number
  width: number
  height: number
}

/**
 * The viewfinder inside the picture: the window shows the middle of the frame (cover), and of that 80 % of the width
 * and at most 60 % of the frame's height are looked at.
 */
export function viewfinder(video: { width: number; height: number }, shown: { width: number; height: number }): Region {
  const scale = Math.max(shown.width / video.width, shown.height / video.height)
  const seenWidth = Math.min(video.width, shown.width / scale)
  const seenHeight = Math.min(video.height, shown.height / scale)
  const width = Math.round(seenWidth * 0.8)
  const height = Math.round(Math.min(seenHeight, video.height * 0.6))
  return {
    x: Math.round((video.width - width) / 2),
    y: Math.round((video.height - height) / 2),
    width,
    height,
  }
}

/** Formats whose check characters are weak: a code counts only when it was read twice alike. */
const weak = ['ean13', 'ean8', 'upca', 'itf', 'code39']
const FORGET_AFTER_EMPTY = 3
const FORGET_AFTER_MS = 1_500

/**
 * Turns attempts into reads: weak codes need two equal reads, and a code that stays in view is given once, until three
 * frames in a row were empty or 1.5 seconds passed without it.
 *
 * @returns takes each attempt with the time in milliseconds; gives a read or null
 */
export function makeSteady(): (found: Decoded | null, now: number) => Decoded | null {
  let candidate: string | null = null
  let given: { key: string; seenAt: number } | null = null
  let empty = 0
  return (found, now) => {
    if (!found) {
      empty += 1
      if (empty >= FORGET_AFTER_EMPTY || (given && now - given.seenAt > FORGET_AFTER_MS)) given = null
      return null
    }
    empty = 0
    const key = `${found.format} ${found.text}`
    if (given?.key === key && now - given.seenAt <= FORGET_AFTER_MS) {
      given.seenAt = now
      return null
    }
    if (weak.includes(found.format) && candidate !== key) {
      candidate = key
      return null
    }
    candidate = null
    given = { key, seenAt: now }
    return found
  }
}

/** Milliseconds to wait before the next attempt: 10 a second while they are quick, 4 a second when they take long. */
export const pause = (took: number): number => Math.max(0, (took > 80 ? 250 : 100) - took)
